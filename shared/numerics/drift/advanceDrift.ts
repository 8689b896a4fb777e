import { relativeError } from "../verdict/relativeError.ts";
import { advanceEntry } from "./advanceEntry.ts";
import type { DriftNews } from "./driftNews.ts";
import { driftEventsOf, newDriftNews } from "./driftNews.ts";
import { errorSteps } from "./errorSteps.ts";
import { isQuiet } from "./isQuiet.ts";
import { learnBaseline } from "./learnBaseline.ts";
import { BASELINE_BUILDS, STEPS_PER_DECADE } from "./rules.ts";
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
  const length = state.count.length;
  for (const [name, plane] of Object.entries({ derivative, reference, resolution, verdict })) {
    if (plane.length !== length) throw new RangeError(`${name}: ${plane.length} numbers, expected ${length}`);
  }
  for (let k = 0; k < length; k += 1) {
    const error = relativeError(derivative[k], reference[k], floor);
    const standing = standingOf(verdict[k], error, resolution[k]);
    state.standing[k] = standing;
    if (standing === STANDING.silent) continue;
    advanceEntry(state, k, errorSteps(error, resolution[k]), standing, buildId, news);
  }
}

function repeat(state: DriftState, buildId: number, times: number, news: DriftNews): void {
  const { standing, last, count, centre, cusum, climbing } = state;
  for (let k = 0; k < standing.length; k += 1) {
    if (standing[k] === STANDING.silent) continue;
    const still = cusum[k] === 0 && climbing[k] === 0 && last[k] <= centre[k] * STEPS_PER_DECADE;
    if (still && count[k] === BASELINE_BUILDS) continue;
    if (times > 1) {
      if (count[k] < BASELINE_BUILDS) learnBaseline(state, k, last[k], times);
    } else {
      advanceEntry(state, k, last[k], standing[k], buildId, news);
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
