/**
 * Absolute uncertainty of an entry from the resolution in its record.
 *
 * Formula: U = resolution * max(|reference|, floor).
 * Units: resolution dimensionless; reference, floor and result in the unit of the entry.
 * Domain: resolution >= 0 or +Infinity, floor >= 0. Throws: never.
 * NaN policy: NaN when the resolution or the reference is NaN (unreferenced); +Infinity stays +Infinity even where
 * max(|reference|, floor) is 0.
 * Accuracy: not below the U that was judged with, and at most 2^-23 relative above it, because the resolution was
 * rounded up to binary32.
 * Source: section 2 of the judging rules (resolution); IEEE Std 754-2019 (binary32).
 */
export function absoluteUncertainty(resolution: number, reference: number, floor: number): number {
  const size = Math.max(Math.abs(reference), floor);
  return resolution === Infinity && size === size ? Infinity : resolution * size;
}
