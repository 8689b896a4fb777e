const NEAREST = new Float32Array(1);
const BITS = new Int32Array(NEAREST.buffer);

/**
 * The smallest binary32 number that is not below a number >= 0; +Infinity and NaN are kept.
 * Source: IEEE Std 754-2019 (the next number up has the next bit pattern).
 */
export function roundUp(value: number): number {
  NEAREST[0] = value;
  if (NEAREST[0] < value) BITS[0]! += 1;
  return NEAREST[0]!;
}
