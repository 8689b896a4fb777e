import { relativeError } from "../verdict/relativeError.ts";
import { advanceEntry, repeatEntry } from "./advanceEntry.ts";
import type { DriftNews } from "./driftNews.ts";
import { driftEventsOf, newDriftNews } from "./driftNews.ts";
import { errorSteps } from "./errorSteps.ts";
import { isQuiet } from "./isQuiet.ts";
import { ALLOWANCE, BASELINE_BUILDS, STEPS_PER_DECADE } from "./rules.ts";
import { standingOf } from "./standingOf.ts";
import type { DriftEvents, DriftState, DriftValues } from "./types.ts";
import { STANDING } from "./types.ts";

/**
 * Takes one more build of a block into its running drift, in place, and tells what happened (section 4 of the judging
 * rules; `driftSeries` is the definition, and both give the same numbers to the last bit).
 *
 * Shapes: the planes of `values` have one element an entry of `state`; null = the same numbers as in the build before.
 * `times` = so many builds in a row with those same numbers: more than one only where nothing can happen, that is with
 * null values on a state that `isQuiet`. Units: events in decades. Domain: buildId a positive 32-bit integer.
 * Throws: RangeError naming the argument whose shape is wrong, or `times` where it is not allowed.
 * NaN policy: an entry whose verdict is unreferenced, invalid or disagrees, or whose resolution is NaN or +Infinity,
 * says nothing: its state stays as it is.
 * Cost: one pass, nothing allocated per entry except the block's window while baselines are young; an unchanged entry
 * whose baseline is whole costs a few loads.
 * Source: E. S. Page, Continuous Inspection Schemes, Biometrika 41:100-115, 1954; NIST/SEMATECH e-Handbook 6.3.2.3.
 */
export function advanceDrift(state: DriftState, buildId: number, values: DriftValues | null, times = 1): DriftEvents {
  if (!Number.isInteger(times) || times < 1) throw new RangeError(`times: ${times}, expected a whole number >= 1`);
  if (times > 1 && (values !== null || !isQuiet(state))) {
    throw new RangeError(`times: ${times}, but only a quiet state can be repeated unseen`);
  }
  const news = newDriftNews();
  if (values === null) repeat(state, buildId, times, news);
  else take(state, buildId, values, news);
  if (state.window !== null && !hasYoung(state.count)) state.window = null;
  return driftEventsOf(news);
}

function take(state: DriftState, buildId: number, values: DriftValues, news: DriftNews): void {
  const { derivative, reference, resolution, verdict, floor } = values;
  const { standing, last, awake } = state;
  for (const [name, plane] of Object.entries({ derivative, reference, resolution, verdict })) {
    if (plane.length !== last.length) throw new RangeError(`${name}: ${plane.length} numbers, expected ${last.length}`);
  }
  for (let k = 0; k < last.length; k += 1) {
    const error = relativeError(derivative[k], reference[k], floor);
    const told = standingOf(verdict[k], error, resolution[k]);
    standing[k] = told;
    if (told === STANDING.silent) {
      awake[k] = 0;
      continue;
    }
    const g = errorSteps(error, resolution[k]);
    if (isCalm(state, k, g, told)) {
      last[k] = g;
      awake[k] = 0;
    } else {
      advanceEntry(state, k, g, buildId, news);
    }
  }
}

/** The short way: the baseline is whole, S is 0 and stays so; then nothing can be told, and a repeat changes nothing. */
function isCalm(state: DriftState, k: number, g: number, told: number): boolean {
  if (state.count[k] !== BASELINE_BUILDS || state.cusum[k] !== 0 || state.climbing[k] !== 0) return false;
  return told === STANDING.within || (g / STEPS_PER_DECADE - state.centre[k]) / state.spread[k] <= ALLOWANCE;
}

function repeat(state: DriftState, buildId: number, times: number, news: DriftNews): void {
  const { awake } = state;
  for (let k = 0; k < awake.length; k += 1) {
    for (let left = times; left > 0 && awake[k] !== 0; left -= 1) {
      repeatEntry(state, k, buildId, news);
    }
  }
}

/** True while the baseline of an entry has begun and is not whole. */
function hasYoung(count: Uint8Array): boolean {
  for (const n of count) {
    if (n > 0 && n < BASELINE_BUILDS) return true;
  }
  return false;
}
