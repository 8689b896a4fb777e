/**
 * Median absolute deviation of ascending numbers about their median, without a copy.
 *
 * Formula: median of |x - median(x)|, the unscaled MAD; of an even count the mean of the two in the middle, both times.
 * Walks outwards from the middle and takes the smaller of the two next deviations until half of them are taken.
 *
 * Shapes: the `count` numbers from index `from` on, ascending. Domain: finite; NaN for count 0.
 * Throws: never (the caller's kernel has checked its window). Accuracy: exact for integers.
 * Cost: one pass over half of the numbers, nothing allocated.
 * Source: F. R. Hampel, The influence curve and its role in robust estimation, J. Am. Stat. Assoc. 69:383-393, 1974.
 */
export function sortedDeviation(values: ArrayLike<number>, from: number, count: number): number {
  if (count === 0) return NaN;
  const lower = (count - 1) >> 1;
  const upper = count >> 1;
  const centre = (values[from + lower] + values[from + upper]) / 2;
  let left = lower;
  let right = left + 1;
  let before = 0;
  let deviation = 0;
  for (let taken = 0; taken <= upper; taken += 1) {
    before = deviation;
    const below = left >= 0 ? centre - values[from + left] : Infinity;
    const above = right < count ? values[from + right] - centre : Infinity;
    deviation = Math.min(below, above);
    if (below <= above) left -= 1;
    else right += 1;
  }
  return lower === upper ? deviation : (before + deviation) / 2;
}
