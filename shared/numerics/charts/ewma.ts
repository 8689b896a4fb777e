export interface EwmaChart {
  readonly values: Float64Array;
  /** Half width of the limits about the start at each value; it grows to `width`. */
  readonly halfWidths: Float64Array;
  /** Half width of the limits in the long run. */
  readonly width: number;
  /** Index of the first value outside the long-run limits, -1 if none is. */
  readonly signal: number;
}

/**
 * Exponentially weighted moving average of a series, with its control limits.
 *
 * Formula: E_i = lambda x_i + (1 - lambda) E_(i-1), E_0 = start; limits start +- factor sigma sqrt(lambda/(2 - lambda)
 * (1 - (1 - lambda)^(2i))), i = 1, 2, ...; in the long run without the last bracket.
 * Shapes: one element a value. Units: start and sigma in the unit of x. Domain: 0 < lambda <= 1, sigma, factor >= 0.
 * Throws: RangeError naming the argument. NaN policy: a NaN says nothing: the average stays.
 * Source: NIST/SEMATECH e-Handbook of Statistical Methods 6.3.2.4; S. W. Roberts, Technometrics 1:239-250, 1959;
 * J. M. Lucas, M. S. Saccucci, Technometrics 32:1-12, 1990.
 */
export function ewma(
  x: ArrayLike<number>,
  options: { readonly start: number; readonly lambda: number; readonly sigma: number; readonly factor: number },
): EwmaChart {
  const { start, lambda, sigma, factor } = options;
  if (!(lambda > 0 && lambda <= 1)) throw new RangeError(`lambda: ${lambda}, expected a number in (0, 1]`);
  if (!(sigma >= 0)) throw new RangeError(`sigma: ${sigma}, expected a number >= 0`);
  if (!(factor >= 0)) throw new RangeError(`factor: ${factor}, expected a number >= 0`);
  const values = new Float64Array(x.length);
  const halfWidths = new Float64Array(x.length);
  const width = factor * sigma * Math.sqrt(lambda / (2 - lambda));
  let signal = -1;
  let average = start;
  for (let i = 0; i < x.length; i += 1) {
    if (!Number.isNaN(x[i])) average = lambda * x[i] + (1 - lambda) * average;
    values[i] = average;
    halfWidths[i] = width * Math.sqrt(1 - (1 - lambda) ** (2 * (i + 1)));
    if (signal < 0 && Math.abs(average - start) > width) signal = i;
  }
  return { values, halfWidths, width, signal };
}
