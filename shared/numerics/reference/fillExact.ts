import { UNIT_ROUNDOFF } from "../roundoff.ts";
import type { Estimates } from "./estimator.ts";
import { BLIND } from "./estimator.ts";

const ROUNDOFFS = 64;

/**
 * Estimates by a method without truncation (`analytic`, `ad-*`, `high-precision`): U = 64 u max(|r|, floor).
 *
 * Shapes: `values` without infinities; rows first <= i < last go to the start of `out`. NaN policy: NaN is no
 * estimate. Cost: one pass, nothing is allocated per entry. Returns how many entries have no estimate or are 0.
 */
export function fillExact(
  values: Float64Array,
  width: number,
  floor: number,
  first: number,
  last: number,
  out: Estimates,
): number {
  if (out.value !== values) out.value.set(values.subarray(first * width, last * width));
  let odd = 0;
  for (let at = first * width, k = 0; at < last * width; at += 1, k += 1) {
    const m = Math.abs(values[at]);
    out.uncertainty[k] = ROUNDOFFS * UNIT_ROUNDOFF * Math.max(m, floor);
    if (m > 0) continue;
    odd += 1;
    if (m === 0) out.unchanged[k] = BLIND;
  }
  return odd;
}
