import type { UncertaintyKind } from "../../domain/vocabulary.ts";

/** Codes of `Estimates.unchanged`. CHANGED: the estimate is not 0, or not at every step. */
export const CHANGED = 0;
/** Exactly 0 at every step, one of which could have seen a change of the entry's natural size P/L above the noise. */
export const SAW_NO_CHANGE = 1;
/** Exactly 0 at every step, but by steps too small to see anything. */
export const BLIND = 2;

/** Estimates of a band of rows by one reference, row-major over the columns that it covers. */
export interface Estimates {
  /** NaN = none. */
  readonly value: Float64Array;
  /** U >= 0; NaN = none. */
  readonly uncertainty: Float64Array;
  /** Index of the step used, as posted. */
  readonly step: Uint8Array;
  readonly unchanged: Uint8Array;
}

/** The values of a reference that is not a sweep: they are its estimates as they stand. */
export interface Posted {
  /** The posted plane itself, or a copy with NaN for what is infinite. */
  readonly values: Float64Array;
  /** Index of the largest |value|, -1 where there is none. */
  readonly peak: number;
}

/** One reference made ready: all that depends on its columns alone is worked out. */
export interface Estimator {
  readonly kind: UncertaintyKind;
  /** Columns covered. */
  readonly width: number;
  /** Position of each block column among the covered ones, -1 where not covered; null = all, in order. */
  readonly position: Int32Array | null;
  /** True where |F|, |x| or the step had to be assumed. */
  readonly assumed: boolean;
  /** Null for a sweep. */
  readonly posted: Posted | null;
  /**
   * Writes the estimates of rows first <= i < last to the start of `out`, whose `step` and `unchanged` must be 0.
   * `out.value` may be the posted values themselves: then it is left alone. Returns how many entries have no
   * estimate or are exactly 0.
   */
  readonly fill: (first: number, last: number, out: Estimates) => number;
}

/** Room for the estimates of `entries` entries; `value` is used in place of a new array. */
export function newEstimates(entries: number, value: Float64Array = new Float64Array(entries)): Estimates {
  return {
    value,
    uncertainty: new Float64Array(entries),
    step: new Uint8Array(entries),
    unchanged: new Uint8Array(entries),
  };
}
