import type { UncertaintyKind } from "../../domain/vocabulary.ts";

/** Codes of `Estimates.unchanged`. CHANGED: the estimate is not 0, or not at every step. */
export const CHANGED = 0;
/** Exactly 0 at every step, by steps that could have seen a change of the entry's natural size. */
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

/** What a kernel noticed on its way. */
export interface FillResult {
  /** Entries that have no estimate or are exactly 0. */
  readonly odd: number;
  /** Largest |value| among the entries with U <= |value|/2. */
  readonly largest: number;
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
  /** The posted values where they are the estimates as they stand, else null. */
  readonly posted: Float64Array | null;
  /**
   * Writes the estimates of rows first <= i < last to the start of `out`, whose `step` and `unchanged` must be 0.
   * `out.value` may be `posted` itself when all rows are asked for.
   */
  readonly fill: (first: number, last: number, out: Estimates) => FillResult;
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
