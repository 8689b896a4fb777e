/**
 * Largest |value| among the entries whose size their reference knows (U <= |value|/2); 0 where there is none.
 * NaN policy: entries without a reference do not count. One pass, nothing is allocated.
 */
export function largestKnown(value: Float64Array, uncertainty: Float64Array): number {
  let largest = 0;
  for (let k = 0; k < value.length; k += 1) {
    const m = Math.abs(value[k]);
    if (m > largest && 2 * uncertainty[k] <= m) largest = m;
  }
  return largest;
}
