import { median } from "./median.ts";

/**
 * Median absolute deviation about the median, unscaled: times 1.4826 it estimates the standard deviation of normal
 * values.
 *
 * Formula: median of |x - median(x)|. Domain: numbers; NaN for none. Throws: never. NaN policy: a NaN among them gives
 * NaN. Cost: two sorted copies; kernels with sorted windows use `sortedDeviation`.
 * Source: F. R. Hampel, The influence curve and its role in robust estimation, J. Am. Stat. Assoc. 69:383-393, 1974.
 */
export function medianAbsoluteDeviation(values: ArrayLike<number>): number {
  const centre = median(values);
  return median(Float64Array.from(values, (value) => Math.abs(value - centre)));
}
