import type { ColumnModel } from "./columnModel.ts";
import type { Estimates } from "./estimator.ts";
import { BLIND, SAW_NO_CHANGE } from "./estimator.ts";
import type { Geometry } from "./geometry.ts";
import { entrySize } from "./stepModel.ts";

/**
 * Estimates by a single step: the posted values with their modelled uncertainty, U as in `stepModel`.
 *
 * Shapes: `values` the reference's plane without infinities, `rowSize` one size P > 0 a row; rows first <= i < last
 * go to the start of `out`. NaN policy: NaN is no estimate. Cost: one pass, nothing is allocated per entry.
 * Returns how many entries have no estimate or are exactly 0.
 */
export function fillSingleStep(
  values: Float64Array,
  model: ColumnModel,
  rowSize: Float64Array,
  sizes: Geometry,
  first: number,
  last: number,
  out: Estimates,
): number {
  const { truncation, noise, rounding, perLength } = model;
  const { width, outputs } = sizes;
  const { uncertainty, unchanged } = out;
  if (out.value !== values) out.value.set(values.subarray(first * width, last * width));
  let odd = 0;
  for (let row = first, k = 0, at = first * width; row < last; row += 1) {
    const value = outputs[row];
    const size = rowSize[row];
    for (let c = 0; c < width; c += 1, k += 1, at += 1) {
      const m = Math.abs(values[at]);
      const ofRow = size * perLength[c];
      const u = entrySize(m, value * perLength[c], ofRow) * truncation[c] + size * noise[c] + m * rounding[c];
      uncertainty[k] = u;
      if (m > 0) continue;
      odd += 1;
      if (m === 0) unchanged[k] = noise[c] <= perLength[c] ? SAW_NO_CHANGE : BLIND;
    }
  }
  return odd;
}
