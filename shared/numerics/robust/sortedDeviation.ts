/**
 * Median absolute deviation of ascending numbers about their median, without a copy.
 *
 * Formula: median of |x - median(x)|, the unscaled MAD; of an even count the mean of the two in the middle, both times.
 * The j numbers nearest to the median are neighbours, so the j-th smallest deviation is the least, over all runs of j
 * numbers, of the larger of the deviations at the run's two ends.
 *
 * Shapes: the `count` numbers from index `from` on, ascending. Domain: finite; NaN for count 0.
 * Throws: never (the caller's kernel has checked its window). Accuracy: exact for integers.
 * Cost: about half as many steps as numbers, twice that for an even count; nothing allocated, no branch to mispredict.
 * Source: F. R. Hampel, The influence curve and its role in robust estimation, J. Am. Stat. Assoc. 69:383-393, 1974.
 */
export function sortedDeviation(values: ArrayLike<number>, from: number, count: number): number {
  if (count === 0) return NaN;
  const lower = (count - 1) >> 1;
  const upper = count >> 1;
  const centre = (values[from + lower] + values[from + upper]) / 2;
  const deviation = smallestDeviation(values, from, count, centre, upper + 1);
  return lower === upper ? deviation : (deviation + smallestDeviation(values, from, count, centre, upper)) / 2;
}

/** The j-th smallest |x - centre|. */
function smallestDeviation(values: ArrayLike<number>, from: number, count: number, centre: number, j: number): number {
  let least = Infinity;
  for (let first = from; first <= from + count - j; first += 1) {
    least = Math.min(least, Math.max(centre - values[first], values[first + j - 1] - centre));
  }
  return least;
}
