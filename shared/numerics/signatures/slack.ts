import { UNIT_ROUNDOFF } from "../roundoff.ts";
import type { Evidence } from "./types.ts";

/**
 * How far a candidate for entry k may be from the derivative: U + T, T = rtol max(|r|, floor).
 *
 * Units: those of the entry. Throws: never. NaN policy: NaN without a reference, +Infinity where it cannot tell.
 * Source: sections 2 and 5 of the judging rules.
 */
export function slackOf({ reference, resolution, floor, rtol }: Evidence, k: number): number {
  const size = Math.max(Math.abs(reference[k]), floor);
  const relative = resolution[k] + rtol;
  return size === 0 && relative === relative ? (relative === Infinity ? Infinity : 0) : relative * size;
}

/** True where a is `candidate` within `slack` and the rounding of the candidate itself; false for what is no number. */
export function isWithin(a: number, candidate: number, slack: number): boolean {
  return Math.abs(a - candidate) <= slack + 4 * UNIT_ROUNDOFF * Math.abs(candidate);
}

/** True where the reference knows that r is not 0. */
export function isKnown(evidence: Evidence, k: number): boolean {
  const r = Math.abs(evidence.reference[k]);
  return r > evidence.resolution[k] * Math.max(r, evidence.floor);
}
