export interface CusumChart {
  /** Sums of what lies above target + k and below target - k. */
  readonly upper: Float64Array;
  readonly lower: Float64Array;
  /** Index of the first value at which a sum exceeds h, -1 if none does. */
  readonly signal: number;
}

/**
 * Two-sided tabular CUSUM of a series.
 *
 * Formula: U_i = max(0, U_(i-1) + x_i - target - k), L_i = max(0, L_(i-1) + target - k - x_i), both from 0; a signal
 * where U or L > h. Shapes: one sum of each side a value. Units: target, k and h in the unit of x.
 * Domain: k, h >= 0. Throws: RangeError naming the argument. NaN policy: a NaN says nothing: both sums stay; an
 * infinite value drives its side to infinity for good and the other to 0.
 * Source: NIST/SEMATECH e-Handbook of Statistical Methods 6.3.2.3; E. S. Page, Biometrika 41:100-115, 1954.
 */
export function tabularCusum(
  x: ArrayLike<number>,
  { target, k, h }: { readonly target: number; readonly k: number; readonly h: number },
): CusumChart {
  if (!(k >= 0)) throw new RangeError(`k: ${k}, expected a number >= 0`);
  if (!(h >= 0)) throw new RangeError(`h: ${h}, expected a number >= 0`);
  const upper = new Float64Array(x.length);
  const lower = new Float64Array(x.length);
  let signal = -1;
  let above = 0;
  let below = 0;
  for (let i = 0; i < x.length; i += 1) {
    const distance = x[i] - target;
    above = nextSum(above, distance - k);
    below = nextSum(below, -distance - k);
    upper[i] = above;
    lower[i] = below;
    if (signal < 0 && (above > h || below > h)) signal = i;
  }
  return { upper, lower, signal };
}

/** max(0, sum + step), or the sum as it is where the step is NaN or would take infinity from infinity. */
function nextSum(sum: number, step: number): number {
  const next = sum + step;
  return Number.isNaN(next) ? sum : Math.max(0, next);
}
