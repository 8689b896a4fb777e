/** Largest |value| among the finite ones; 0 when there is none. One pass, nothing is allocated. */
export function largestMagnitude(values: Float64Array): number {
  let largest = 0;
  for (let k = 0; k < values.length; k += 1) {
    const m = Math.abs(values[k]);
    if (m > largest && m < Infinity) largest = m;
  }
  return largest;
}
