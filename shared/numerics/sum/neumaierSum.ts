/**
 * Compensated sum: each addition's rounding error is recovered exactly and added at the end, whichever of the two
 * addends is the larger.
 *
 * Formula: s = x_1 + x_2 + ...; per step c += (s - t) + x or (x - t) + s, t = s + x; result s + c.
 * Shapes and units: any length; the unit of the values. Empty: 0.
 * Throws: never. NaN policy: NaN and infinities propagate as in a plain sum (the correction is dropped).
 * Accuracy: error at most u |sum| + O(n u^2) sum|x_i|. Cost: 4 additions a value, no allocation.
 * Source: A. Neumaier, Rundungsfehleranalyse einiger Verfahren zur Summation endlicher Summen, ZAMM 54:39-51, 1974,
 * doi:10.1002/zamm.19740540106; N. J. Higham, Accuracy and Stability of Numerical Algorithms, 2nd ed., SIAM 2002, 4.3.
 */
export function neumaierSum(values: ArrayLike<number>): number {
  let sum = 0;
  let correction = 0;
  for (let k = 0; k < values.length; k += 1) {
    const x = values[k];
    const total = sum + x;
    correction += Math.abs(sum) >= Math.abs(x) ? sum - total + x : x - total + sum;
    sum = total;
  }
  const corrected = sum + correction;
  return Number.isFinite(corrected) ? corrected : sum;
}
