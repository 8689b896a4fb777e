/**
 * Median.
 *
 * Formula: the middle number, of an even count the mean of the two in the middle. Domain: numbers; NaN for none.
 * Throws: never. NaN policy: a NaN among them gives NaN. Accuracy: exact, but for one rounding of an even count; two
 * numbers whose sum overflows are halved first. Cost: one sorted copy.
 * Source: NIST/SEMATECH e-Handbook of Statistical Methods 1.3.5.1.
 */
export function median(values: ArrayLike<number>): number {
  const sorted = Float64Array.from(values).sort();
  const lower = sorted[(sorted.length - 1) >> 1];
  const upper = sorted[sorted.length >> 1];
  if (sorted.length === 0 || Number.isNaN(sorted[sorted.length - 1])) return NaN;
  if (lower === upper) return lower;
  const sum = lower + upper;
  return Number.isFinite(sum) ? sum / 2 : lower / 2 + upper / 2;
}
