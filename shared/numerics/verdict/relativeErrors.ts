import { relativeError } from "./relativeError.ts";

/**
 * Plane of relative errors for readers of a block.
 *
 * Formula: out_k = |a_k - r_k| / max(|r_k|, floor), see `relativeError`.
 * Shapes: `derivative`, `reference` and `out` of one length; row-major planes or any window of them.
 * Units: dimensionless result. Domain: floor >= 0.
 * Throws: RangeError naming the argument whose length differs.
 * NaN policy: NaN where the entry is unreferenced (reference NaN) or invalid (derivative not finite).
 * Cost: one pass, no allocation.
 * Source: section 2 of the judging rules.
 */
export function relativeErrors(
  derivative: Float64Array,
  reference: Float64Array,
  floor: number,
  out: Float64Array,
): Float64Array {
  const length = derivative.length;
  if (reference.length !== length) throw new RangeError(`reference: ${reference.length} numbers, expected ${length}`);
  if (out.length !== length) throw new RangeError(`out: ${out.length} numbers, expected ${length}`);
  for (let k = 0; k < length; k += 1) {
    out[k] = relativeError(derivative[k], reference[k], floor);
  }
  return out;
}
