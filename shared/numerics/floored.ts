const CHOICES = new Float64Array(2);

/**
 * max(m, floor), NaN where m is NaN. A table and no condition: half of a block's entries may lie under the floor, and
 * a branch that is taken every other time costs more than the rest of a kernel.
 */
export function floored(m: number, floor: number): number {
  CHOICES[0] = m;
  CHOICES[1] = floor;
  return CHOICES[Number(m < floor)];
}
