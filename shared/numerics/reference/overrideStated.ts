import type { ReferenceNumbers } from "../types.ts";
import type { Estimates } from "./estimator.ts";
import { BLIND, SAW_NO_CHANGE } from "./estimator.ts";

/**
 * Puts the stated uncertainty in place of the worked-out one, for the first `count` estimates of `out`, which are
 * the entries from `start` of the reference's own plane. A stated number that is NaN or negative states nothing.
 */
export function overrideStated(
  stated: NonNullable<ReferenceNumbers["uncertainty"]>,
  start: number,
  count: number,
  out: Estimates,
): void {
  for (let k = 0; k < count; k += 1) {
    const u = typeof stated === "number" ? stated : stated[start + k];
    if (!(u >= 0 && out.uncertainty[k] >= 0)) continue;
    out.uncertainty[k] = u;
    if (out.unchanged[k] === BLIND && u < Infinity) out.unchanged[k] = SAW_NO_CHANGE;
  }
}
