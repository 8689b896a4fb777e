/** Index of the largest |value|, infinite ones included; -1 where all are NaN. One pass, nothing is allocated. */
export function largestMagnitude(values: Float64Array, start = 0, end = values.length): number {
  let largest = -1;
  let index = -1;
  for (let k = start; k < end; k += 1) {
    const m = Math.abs(values[k]);
    if (m > largest) {
      largest = m;
      index = k;
    }
  }
  return index;
}
