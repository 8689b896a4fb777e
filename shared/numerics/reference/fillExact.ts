import { UNIT_ROUNDOFF } from "../roundoff.ts";
import type { Estimates, FillResult } from "./estimator.ts";
import { BLIND } from "./estimator.ts";

const ROUNDOFFS = 64;

/**
 * Estimates by a method without truncation (`analytic`, `ad-*`, `high-precision`): U = 64 u max(|r|, floor).
 *
 * NaN policy: a value that is not finite is no estimate (NaN). Cost: one pass, nothing is allocated.
 */
export function fillExact(
  values: Float64Array,
  width: number,
  floor: number,
  first: number,
  last: number,
  out: Estimates,
): FillResult {
  const copy = out.value === values ? null : out.value;
  let odd = 0;
  let largest = 0;
  for (let at = first * width, k = 0; at < last * width; at += 1, k += 1) {
    const r = values[at];
    const m = Math.abs(r);
    const u = ROUNDOFFS * UNIT_ROUNDOFF * Math.max(m, floor) + (r - r);
    out.uncertainty[k] = u;
    if (copy !== null) copy[k] = u >= 0 ? r : NaN;
    if (m > largest && 2 * u <= m) largest = m;
    if (m > 0 && u >= 0) continue;
    odd += 1;
    if (m === 0) out.unchanged[k] = BLIND;
  }
  return { odd, largest };
}
