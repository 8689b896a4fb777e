import type { ColumnModel } from "./columnModel.ts";
import type { Estimates, FillResult } from "./estimator.ts";
import { BLIND, SAW_NO_CHANGE } from "./estimator.ts";
import type { Geometry } from "./geometry.ts";
import { entrySize } from "./stepModel.ts";

/**
 * Estimates by a single step: the posted values with their modelled uncertainty, U as in `stepModel`.
 *
 * Shapes: `values` the reference's plane, `rowSize` one size P a row; rows first <= i < last go to the start of `out`.
 * NaN policy: a value that is not finite is no estimate (NaN). Cost: one pass, nothing is allocated per entry.
 */
export function fillSingleStep(
  values: Float64Array,
  model: ColumnModel,
  rowSize: Float64Array,
  sizes: Geometry,
  first: number,
  last: number,
  out: Estimates,
): FillResult {
  const { truncation, noise, rounding, unusable, perLength } = model;
  const { width, outputs } = sizes;
  const { uncertainty, unchanged } = out;
  const copy = out.value === values ? null : out.value;
  let odd = 0;
  let largest = 0;
  for (let row = first, k = 0; row < last; row += 1) {
    const value = outputs[row];
    const size = rowSize[row];
    const at = row * width;
    for (let c = 0; c < width; c += 1, k += 1) {
      const r = values[at + c];
      const m = Math.abs(r);
      const ofRow = size * perLength[c];
      const u =
        entrySize(m, value * perLength[c], ofRow) * truncation[c] + size * noise[c] + m * rounding[c] + unusable[c];
      // r - r is 0, or NaN where r is not finite.
      const finite = u + (r - r);
      uncertainty[k] = finite;
      if (copy !== null) copy[k] = finite >= 0 ? r : NaN;
      if (m > largest && 2 * finite <= m) largest = m;
      if (m > 0 && finite >= 0) continue;
      odd += 1;
      if (m === 0) unchanged[k] = u <= ofRow ? SAW_NO_CHANGE : BLIND;
    }
  }
  return { odd, largest };
}
