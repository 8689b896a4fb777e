import { median } from "../robust/median.ts";
import { medianAbsoluteDeviation } from "../robust/medianAbsoluteDeviation.ts";
import { VERDICT_CODE } from "../../domain/vocabulary.ts";
import { relativeError } from "../verdict/relativeError.ts";
import { errorSteps } from "./errorSteps.ts";
import {
  BASELINE_BUILDS,
  CALM_BUILDS,
  CALM_SPREADS,
  DECISION_INTERVAL,
  driftLimit,
  isHigh,
  jumpLimit,
  nextCusum,
  spreadOf,
  STEPS_PER_DECADE,
  SUSPICION,
  YOUNG_BUILDS,
} from "./rules.ts";
import { standingOf } from "./standingOf.ts";
import type { DriftEventKind, DriftItem, DriftPoint } from "./types.ts";
import { STANDING } from "./types.ts";

/** What is carried from build to build; numbers in decades. */
interface Progress {
  /** g of the builds the baseline has learned from. */
  baseline: number[];
  last: number;
  cusum: number;
  climbing: boolean;
  calm: number;
}

/** What a build is measured with. */
interface Yardstick {
  readonly centre: number;
  readonly spread: number;
  /** A drift from here on is worth telling. */
  readonly limit: number;
}

/**
 * Drift of one entry over its history (section 4 of the judging rules): the definition, which `advanceDrift` follows
 * to the last bit.
 *
 * Formula, for a build whose numbers tell something (`standingOf`), with g as in `errorSteps`, in decades:
 * 1. The baseline is that of the n <= 20 builds learned from since the last restart, this build not included: centre
 *    m = median of g, spread s = max(0.15, 1.4826 MAD) sqrt(1 + pi/(2n)); limit L = max(1, 4 s). Drift = g - m.
 * 2. From n = 5 on: z = drift / s within [-3, 3], not above 0 where d <= U; S = max(0, S + z - 0.5), at most 16, kept
 *    in binary32.
 * 3. `climb`, from n = 5 on, when none is under way: S > 8 and the mean drift of this build and the one before, neither
 *    taken for more than 1.5 L, is at least L. `end` of a climb: drift < 3 s in three builds in a row; S is 0 then.
 * 4. `jump`, from n = 1 on: g rose by at least max(1, 4 sqrt(2) s) since the last build that told something, drift >= L,
 *    d > U, and S was not above 3. Here s is at least 0.3 while n < 20. A climb or end in the same build is told instead.
 * 5. The baseline learns this build if n < 20, S <= 3 and no climb is under way.
 * A build that tells nothing changes nothing, as if it were not there; where it disagrees its drift is still given.
 *
 * Differences to the section, each for fewer false events or to be in time from the fifth build on: the root in s, as
 * the centre is itself estimated; S bounded, which lets repeats come to rest and forgets a past level; the mean in 3, as
 * one lucky build among thousands of entries is certain; in 4 the limits of drift and rise (the way back from a lucky
 * cancellation is no jump, a rise is the difference of two noisy builds) and that of S (a suspected entry that goes to
 * and fro is no news); rule 5, as a baseline that learns a climb never tells it; builds that disagree teach nothing.
 *
 * Shapes: one point an item, null where there was no item or it is silent but for a disagreement. `restartsBefore`: indices of the items
 * before which a new baseline was accepted. Throws: never. NaN policy: see `standingOf`.
 * Source: E. S. Page, Continuous Inspection Schemes, Biometrika 41:100-115, 1954; NIST/SEMATECH e-Handbook 6.3.2.3.
 */
export function driftSeries(
  items: readonly (DriftItem | null)[],
  restartsBefore: ReadonlySet<number>,
): (DriftPoint | null)[] {
  const progress: Progress = { baseline: [], last: NaN, cusum: 0, climbing: false, calm: 0 };
  return items.map((item, k) => {
    if (restartsBefore.has(k)) Object.assign(progress, { baseline: [], cusum: 0, climbing: false, calm: 0 });
    return item === null ? null : pointOf(item, progress);
  });
}

function pointOf(item: DriftItem, progress: Progress): DriftPoint | null {
  const error = relativeError(item.derivative, item.reference, item.floor);
  const standing = standingOf(item.verdict, error, item.resolution);
  const disagrees = item.verdict === VERDICT_CODE.disagrees && error >= 0 && item.resolution < Infinity;
  if (standing === STANDING.silent && !disagrees) return null;
  const g = errorSteps(error, item.resolution) / STEPS_PER_DECADE;
  const yardstick = yardstickOf(progress.baseline);
  const grown = progress.baseline.length >= YOUNG_BUILDS;
  const event = disagrees ? null : takeBuild(progress, yardstick, g, standing === STANDING.beyond);
  return {
    decades: grown ? g - yardstick.centre : null,
    cusum: progress.cusum,
    centre: grown ? yardstick.centre : null,
    spread: grown ? yardstick.spread : null,
    event,
  };
}

function yardstickOf(baseline: readonly number[]): Yardstick {
  const spread = Math.fround(spreadOf(baseline.length, medianAbsoluteDeviation(baseline)));
  return { centre: median(baseline), spread, limit: driftLimit(spread) };
}

function takeBuild(progress: Progress, yardstick: Yardstick, g: number, beyond: boolean): DriftEventKind | null {
  const learned = progress.baseline.length;
  const event = learned === 0 ? null : eventOf(progress, yardstick, g, beyond);
  const suspect = progress.climbing || progress.cusum > SUSPICION;
  if (learned < BASELINE_BUILDS && !suspect) progress.baseline.push(g);
  progress.last = g;
  return event;
}

function eventOf(progress: Progress, yardstick: Yardstick, g: number, beyond: boolean): DriftEventKind | null {
  const drift = g - yardstick.centre;
  const suspected = progress.cusum > SUSPICION;
  if (progress.baseline.length >= YOUNG_BUILDS) {
    progress.cusum = Math.fround(nextCusum(progress.cusum, drift / yardstick.spread, beyond));
    if (progress.climbing) {
      if (ends(progress, drift < CALM_SPREADS * yardstick.spread)) return "end";
    } else if (progress.cusum > DECISION_INTERVAL && isHigh(drift, progress.last - yardstick.centre, yardstick.limit)) {
      progress.climbing = true;
      return "climb";
    }
  }
  const rises = g - progress.last >= jumpLimit(progress.baseline.length, yardstick.spread);
  return beyond && !suspected && rises && drift >= yardstick.limit ? "jump" : null;
}

function ends(progress: Progress, calm: boolean): boolean {
  progress.calm = calm ? progress.calm + 1 : 0;
  if (progress.calm < CALM_BUILDS) return false;
  Object.assign(progress, { climbing: false, calm: 0, cusum: 0 });
  return true;
}
