import type { ReferenceMethod } from "../../domain/vocabulary.ts";

/** What the errors of a column's steps are made of: which part is the larger one. */
export const STEP_BRANCHES = ["truncation", "rounding", "floor"] as const;
/** `truncation`: smaller steps would be better. `rounding`: larger ones. `floor`: as exact as a method without steps. */
export type StepBranch = (typeof STEP_BRANCHES)[number];

/** What a block's verdicts were made with. */
export interface JudgedWith {
  /** Dimensionless. */
  readonly rtol: number;
  /** In the unit of the entries, as `JudgedBlock.floor`. */
  readonly floor: number;
}

/** A quantity relative to max(|r|, floor), over the rows of a column. */
export interface Pooled {
  readonly median: number;
  readonly largest: number;
}

/** One step of a column, and how far its values may be from the truth. */
export interface StepEstimate {
  /** Absolute step, > 0, in the unit of the input. */
  readonly step: number;
  /** Its index as posted. */
  readonly posted: number;
  readonly branch: StepBranch;
  /** The two parts of the uncertainty, safety factors included. */
  readonly truncation: Pooled;
  readonly rounding: Pooled;
  /** Their sum: U of an entry that is judged with this step. */
  readonly uncertainty: Pooled;
  /** Entries that the judge takes from this step. */
  readonly chosen: number;
}

/** Modelled branches of a column: U(h) / max(|r|, floor) = truncation h^order + rounding / h + floor, medians over the rows. */
export interface StepCurve {
  readonly order: 1 | 2;
  readonly truncation: number;
  readonly rounding: number;
  readonly floor: number;
}

/** What a method would give at its best step. */
export interface StepCandidate {
  readonly method: ReferenceMethod;
  /** Absolute; null where nothing tells one. For a complex step: the largest of the equally good ones. */
  readonly step: number | null;
  /** U / max(|r|, floor) at that step; null where there is no step. */
  readonly resolution: Pooled | null;
  /** Entries that would be resolved at rtol. */
  readonly resolved: number;
}

/** The steps of one input column. */
export interface ColumnStudy {
  /** Column of the block. */
  readonly column: number;
  /** Entries that the reference gives an estimate of. */
  readonly entries: number;
  /** Those whose differences are exactly 0 at every step: decided whatever the step, left out of all medians. */
  readonly quiet: number;
  /** Largest step first; empty where none is usable. */
  readonly steps: readonly StepEstimate[];
  /** Null where no entry tells one. */
  readonly curve: StepCurve | null;
  /** Entries resolved at rtol by the reference as it was posted. */
  readonly resolved: number;
  /** The reference's own method first, then the other two of one-sided difference, central difference, complex step. */
  readonly candidates: readonly StepCandidate[];
  /** Unresolved entries whose error is still truncation at their smallest step. */
  readonly truncated: number;
  /** Unresolved entries whose error is already rounding at their largest step that can be chosen. */
  readonly cancelled: number;
}

/** The study of one reference of a block. */
export interface StepStudy {
  readonly method: ReferenceMethod;
  /** True where noise and curvature come from a sweep, false where they are modelled. */
  readonly measured: boolean;
  /** True where the posted uncertainty was stated: it decides what is resolved as posted. */
  readonly stated: boolean;
  readonly rtol: number;
  readonly columns: readonly ColumnStudy[];
}
