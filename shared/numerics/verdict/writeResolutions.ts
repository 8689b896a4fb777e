/**
 * Resolution of the entries start <= k < end, whose U stand at the start of `uncertainty`.
 *
 * Formula: U / max(|r|, floor), rounded up to the next binary32 number. 0/0 is 0, U/0 is +Infinity.
 * Shapes: `value` and `resolution` of one length. Units: dimensionless.
 * NaN policy: NaN where there is no reference. Accuracy: not below the quotient as binary64 rounds it.
 * Cost: one pass, nothing is allocated per entry.
 * Source: section 2 of the judging rules; IEEE Std 754-2019 (the next number up has the next bit pattern).
 */
export function writeResolutions(
  value: Float64Array,
  uncertainty: Float64Array,
  floor: number,
  start: number,
  end: number,
  resolution: Float32Array,
): void {
  const bits = new Int32Array(resolution.buffer, resolution.byteOffset, resolution.length);
  const nearest = new Float32Array(1);
  const nearestBits = new Int32Array(nearest.buffer);
  for (let k = start, j = 0; k < end; k += 1, j += 1) {
    const u = uncertainty[j];
    const size = Math.max(Math.abs(value[k]), floor);
    const exact = size === 0 && u === 0 ? 0 : u / size;
    const rounded = Math.fround(exact);
    nearest[0] = rounded;
    // Number(...) and no condition: a branch taken every other time costs more than all the rest.
    bits[k] = nearestBits[0] + Number(rounded < exact);
  }
}
