import { UNIT_ROUNDOFF } from "../roundoff.ts";
import { log10Steps } from "./log10Steps.ts";
import { STEPS_PER_DECADE } from "./rules.ts";

const LEAST_ERROR = 2 * UNIT_ROUNDOFF;
const LARGEST = 31 * STEPS_PER_DECADE;

/**
 * Size of an entry's error for drift, in steps of 1/1024 decade.
 *
 * Formula: g = log10 max(e, U / max(|r|, floor), 2u), rounded, at most 31 decades: what lies under the reference's
 * resolution cannot be seen to move. Domain: error and resolution >= 0. Throws: never. NaN policy: not in the domain.
 * Accuracy: that of `log10Steps`. Source: section 4 of the judging rules.
 */
export function errorSteps(error: number, resolution: number): number {
  return Math.min(LARGEST, log10Steps(Math.max(error, resolution, LEAST_ERROR)));
}
