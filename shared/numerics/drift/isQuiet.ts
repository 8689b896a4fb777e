import { STEPS_PER_DECADE } from "./rules.ts";
import type { DriftState } from "./types.ts";
import { STANDING } from "./types.ts";

/**
 * True when repeating the newest build's numbers for ever can never tell an event.
 *
 * Per entry: it is silent (its state stays as it is); or no climb is under way, S is 0, and g is not above the centre
 * or within U, so that z <= 0 and S stays 0. Repeats then only pull the centre towards g, never below it.
 *
 * Cost: one pass, nothing allocated; stops at the first entry that is not quiet.
 */
export function isQuiet(state: DriftState): boolean {
  const { standing, last, centre, cusum, climbing } = state;
  for (let k = 0; k < standing.length; k += 1) {
    if (standing[k] === STANDING.silent) continue;
    if (climbing[k] !== 0 || cusum[k] !== 0) return false;
    if (standing[k] === STANDING.beyond && last[k] > centre[k] * STEPS_PER_DECADE) return false;
  }
  return true;
}
