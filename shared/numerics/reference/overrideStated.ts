import type { ReferenceNumbers } from "../types.ts";
import type { Estimates } from "./estimator.ts";
import { BLIND, SAW_NO_CHANGE } from "./estimator.ts";

/**
 * Puts the stated uncertainty in place of the worked-out one, for the first `count` estimates of `out`, which are
 * the entries from `start` of the reference's own plane. A stated number that is NaN or negative states nothing.
 * Returns the largest |value| among those with U <= |value|/2.
 */
export function overrideStated(
  stated: NonNullable<ReferenceNumbers["uncertainty"]>,
  start: number,
  count: number,
  out: Estimates,
): number {
  let largest = 0;
  for (let k = 0; k < count; k += 1) {
    const u = typeof stated === "number" ? stated : stated[start + k];
    if (u >= 0 && out.uncertainty[k] >= 0) {
      out.uncertainty[k] = u;
      if (out.unchanged[k] === BLIND && u < Infinity) out.unchanged[k] = SAW_NO_CHANGE;
    }
    const m = Math.abs(out.value[k]);
    if (m > largest && 2 * out.uncertainty[k] <= m) largest = m;
  }
  return largest;
}
