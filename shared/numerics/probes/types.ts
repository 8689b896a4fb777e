import type { Verdict } from "../../domain/vocabulary.ts";

/** What a probe of one number comes to; it is recorded as a block of one entry. */
export interface JudgedProbe {
  readonly verdict: Exclude<Verdict, "unreferenced">;
  /** What was measured of the derivative, and what it should be; in the unit of the probe. NaN = not finite. */
  readonly derivative: number;
  readonly reference: number;
  /** Absolute uncertainty U of the comparison, >= 0; +Infinity = cannot tell, NaN = invalid. */
  readonly uncertainty: number;
  /** The size that error and tolerance are relative to. */
  readonly floor: number;
  /** Relative error |derivative - reference| / floor; NaN = invalid. */
  readonly error: number;
  /** Relative tolerance on the error; null where a slope decides. */
  readonly tolerance: number | null;
  /** True where a size that was not posted had to be assumed. */
  readonly assumed: boolean;
  /** What it means, as a clause without a full stop. */
  readonly sentence: string;
}

/** Forward against reverse mode: the same number, <w, J v> = <J^T w, v>, by two ways. */
export interface DotProductProbe {
  readonly forward: number;
  readonly reverse: number;
  /** Size of the terms that were added, |w|^T |J| |v| or an upper bound like ||w|| ||J v||; null = not told. */
  readonly scale: number | null;
  /** Relative precision of the code's arithmetic; null = 2u of binary64. */
  readonly precision: number | null;
  /** Output size + input size: how many roundings a sum may have gone through. */
  readonly length: number;
}

/** Remainders R(h) = |f(x + h d) - f(x) - h g.d| at several steps along one line. */
export interface TaylorProbe {
  /** Positive and distinct, in any order. */
  readonly steps: readonly number[];
  /** One for each step; the sign does not matter. */
  readonly remainders: readonly number[];
  /** |g.d|, the size of the directional derivative; null = not told. */
  readonly scale: number | null;
  /** |f(x)|, the size of the function; null = not told. */
  readonly value: number | null;
  /** Relative precision of the function's values; null = 2u of binary64. */
  readonly precision: number | null;
}

export interface JudgedTaylorProbe extends JudgedProbe {
  /** Least-squares slope of log R against log h over the usable steps; null with fewer than two of them. */
  readonly slope: number | null;
  /** Steps whose remainder stands above the rounding floor. */
  readonly usableSteps: number;
}
