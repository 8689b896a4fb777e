import type { Tolerances } from "../domain/tolerances.ts";
import type { ReferenceMethod, SignatureCode, StepKind, UncertaintyKind } from "../domain/vocabulary.ts";

/** One step of a reference: the estimates made with it. */
export interface ReferenceStep {
  /** Step per covered column, or one for all; null where the method has none (ad-*, analytic, high-precision) or none was posted. */
  readonly step: number | Float64Array | null;
  /** rows x covered columns, row-major. NaN = not computed or not finite. */
  readonly values: Float64Array;
}

/** One posted reference of a block, decoded. */
export interface ReferenceNumbers {
  readonly method: ReferenceMethod;
  readonly stepKind: StepKind;
  /** Relative precision of the function's own values, or null for the default 2u. */
  readonly precision: number | null;
  /** Covered input columns (ascending or not, without repeats), or null for all. */
  readonly columns: Int32Array | null;
  /** One step, or a sweep of several in the order posted. */
  readonly steps: readonly ReferenceStep[];
  /** Stated absolute uncertainty: one number, rows x covered columns, or null if none was stated. */
  readonly uncertainty: number | Float64Array | null;
  /** Posted values that were NaN or infinite (not null): they raise `reference-not-finite`. */
  readonly notFinite: number;
}

/** One block, decoded: all arrays row-major, rows = output elements, columns = input elements. */
export interface BlockNumbers {
  readonly rows: number;
  readonly columns: number;
  /** Output values F (rows) and input values x (columns), or null if not posted. */
  readonly outputValues: Float64Array | null;
  readonly inputValues: Float64Array | null;
  /** rows x columns. */
  readonly derivative: Float64Array;
  readonly references: readonly ReferenceNumbers[];
}

/** Source byte of an entry whose reference is none. */
export const NO_SOURCE = 255;

/** What a block's references told about themselves (section 5 of the judging rules, reference part). */
export interface ReferenceFinding {
  readonly code: Extract<SignatureCode, `reference${string}`>;
  /** Index of the reference in the posting, or null when it concerns several. */
  readonly reference: number | null;
  /** Entries concerned. */
  readonly entries: number;
}

/** Best reference of every entry (section 1). */
export interface BestReference {
  /** rows x columns; NaN = unreferenced. */
  readonly value: Float64Array;
  /** Absolute uncertainty U >= 0; NaN = unreferenced, +Infinity = cannot tell. */
  readonly uncertainty: Float64Array;
  /**
   * Largest |value| among the entries whose size their reference knows (U <= |value|/2); 0 if there is none. The
   * floor of the block is taken from it.
   */
  readonly largest: number;
  /** Index of the chosen reference, NO_SOURCE where none. */
  readonly source: Uint8Array;
  /** Index of the chosen step within that reference, as posted. */
  readonly step: Uint8Array;
  /** 1 where references conflict and the entry must stay unresolved. */
  readonly conflict: Uint8Array;
  /** 1 where every posted difference of the entry is exactly 0 (and there is one), and no other reference says otherwise. */
  readonly sawNoChange: Uint8Array;
  /** True per reference where |F| had to be assumed. */
  readonly assumed: readonly boolean[];
  readonly kinds: readonly UncertaintyKind[];
  readonly findings: readonly ReferenceFinding[];
}

export interface VerdictCounts {
  readonly entries: number;
  readonly agrees: number;
  readonly disagrees: number;
  readonly unresolved: number;
  readonly unreferenced: number;
  readonly invalid: number;
}

/** The entry to show first: the worst by verdict (invalid, disagrees, unresolved, agrees), then by relative error. */
export interface WorstEntry {
  readonly row: number;
  readonly column: number;
  /** Relative error e; NaN when the entry is invalid or unreferenced. */
  readonly error: number;
  readonly derivative: number;
  readonly reference: number;
  readonly uncertainty: number;
}

/** One judged block: sections 1 and 2 of the judging rules. */
export interface JudgedBlock {
  readonly best: BestReference;
  /** rows x columns, codes of VERDICTS. */
  readonly verdict: Uint8Array;
  /**
   * Uncertainty relative to max(|r|, floor), rounded up to binary32: the resolution of the entry. Stored in this
   * form because it neither overflows nor vanishes whatever the entry's magnitude. NaN = unreferenced.
   */
  readonly resolution: Float32Array;
  readonly floor: number;
  readonly tolerances: Tolerances;
  readonly counts: VerdictCounts;
  readonly worst: WorstEntry | null;
}

export interface MotionCounts {
  readonly still: number;
  readonly together: number;
  readonly "derivative-only": number;
  readonly "model-only": number;
  readonly apart: number;
}

/** One side of a motion comparison, as it stands in the record. */
export interface MotionSide {
  readonly derivative: Float64Array;
  readonly reference: Float64Array;
  /** Relative to max(|r|, floor). */
  readonly resolution: Float32Array;
  readonly floor: number;
  readonly outputValues: Float64Array | null;
}
