import type { SignatureCode, SignatureScope } from "../../domain/vocabulary.ts";

/** What a side of a block (its output or its input) is called. */
export interface SideNames {
  readonly name: string;
  readonly unit: string | null;
  readonly elements: readonly string[] | null;
}
export interface BlockNames {
  readonly output: SideNames;
  readonly input: SideNames;
}

/** A recognised kind of mistake, and the narrowest place that holds it. */
export interface NamedSignature {
  readonly code: SignatureCode;
  readonly scope: SignatureScope;
  /** The row of scope `row` and `entry`, the column of `column` and `entry`; else null. */
  readonly row: number | null;
  readonly column: number | null;
  /** Part of what disagrees or is invalid within the scope that it explains. */
  readonly share: number;
  /** A sentence that a developer can act on. */
  readonly detail: string;
  /** What explains the same numbers as well, a sentence each. */
  readonly alternatives: readonly string[];
}

/** A judged block as the candidates look at it; planes rows x columns, row-major. */
export interface Evidence {
  readonly rows: number;
  readonly columns: number;
  readonly derivative: Float64Array;
  /** NaN = unreferenced. */
  readonly reference: Float64Array;
  /** U / max(|r|, floor). */
  readonly resolution: Float32Array;
  readonly floor: number;
  readonly rtol: number;
  readonly names: BlockNames;
}

/** The narrowest place that holds some entries. */
export interface Place {
  readonly scope: SignatureScope;
  readonly row: number | null;
  readonly column: number | null;
}

/**
 * How wide a candidate looks: permutations and products of the chain rule only show in a whole block. Where many single
 * entries are tried, one of them fits something by chance: there a fit must be closer.
 */
export type Width = "block" | "line" | "entry of many";

/** What a candidate is tried on. */
export interface Trial {
  readonly evidence: Evidence;
  /** Flat indices of entries that disagree, ascending. */
  readonly entries: Int32Array;
  readonly width: Width;
}

/** A candidate that explains enough of a trial. */
export interface Match {
  readonly code: SignatureCode;
  /** Numbers that the candidate had to choose: of two that explain the same the one with fewer is the simpler. */
  readonly parameters: number;
  /** Entries explained, ascending. */
  readonly explained: Int32Array;
  /** Entries that are not to be looked at again, ascending. */
  readonly settled: Int32Array;
  /** What is to be said of the place. */
  readonly say: (place: Place) => string;
  readonly alternatives: readonly string[];
}

/** One signature: null where it does not explain enough. */
export type Candidate = (trial: Trial) => Match | null;
