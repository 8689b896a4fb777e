import type { DriftNews } from "./driftNews.ts";
import { tell } from "./driftNews.ts";
import { learnBaseline } from "./learnBaseline.ts";
import {
  BASELINE_BUILDS,
  CALM_BUILDS,
  CALM_SPREADS,
  DECISION_INTERVAL,
  driftLimit,
  isHigh,
  LEAST_DECADES,
  jumpLimit,
  nextCusum,
  STEPS_PER_DECADE,
  SUSPICION,
  YOUNG_BUILDS,
} from "./rules.ts";
import type { DriftState } from "./types.ts";
import { STANDING } from "./types.ts";

/**
 * One build of entry k that told g (in steps), `state.last` still being that of the build before: the rules of
 * `driftSeries`, in place. `state.standing` is that of this build.
 */
export function advanceEntry(state: DriftState, k: number, g: number, buildId: number, news: DriftNews): void {
  if (state.count[k] > 0) watch(state, k, g, buildId, news);
  if (learns(state, k)) learnBaseline(state, k, g, 1);
  state.last[k] = g;
  state.awake[k] = isFixed(state, k) ? 0 : 1;
}

/**
 * The newest build of entry k once more: as `advanceEntry` with the same g, and a short way where the baseline is whole
 * and the drift too small to be told, so that only S moves.
 */
export function repeatEntry(state: DriftState, k: number, buildId: number, news: DriftNews): void {
  const small = driftOf(state, k) < LEAST_DECADES;
  if (!small || state.count[k] !== BASELINE_BUILDS || state.climbing[k] !== 0) {
    advanceEntry(state, k, state.last[k], buildId, news);
    return;
  }
  const old = state.cusum[k];
  const next = repeatedCusum(state, k);
  if (next === 0) state.onset[k] = 0;
  else if (old === 0) state.onset[k] = buildId;
  if (next === 0 || next === old) state.awake[k] = 0;
  state.cusum[k] = next;
}

/** True where the baseline has room, and S does not forbid it to learn. */
export function learns(state: DriftState, k: number): boolean {
  return state.count[k] < BASELINE_BUILDS && state.climbing[k] === 0 && state.cusum[k] <= SUSPICION;
}

/** Drift of the newest build, in decades. */
export function driftOf(state: DriftState, k: number): number {
  return state.last[k] / STEPS_PER_DECADE - state.centre[k];
}

/** S if the newest build's numbers came once more. */
export function repeatedCusum(state: DriftState, k: number): number {
  const z = driftOf(state, k) / state.spread[k];
  return Math.fround(nextCusum(state.cusum[k], z, state.standing[k] === STANDING.beyond));
}

/** True where the newest build's numbers, repeated, would leave everything as it is. */
function isFixed(state: DriftState, k: number): boolean {
  if (learns(state, k)) return false;
  if (repeatedCusum(state, k) !== state.cusum[k]) return false;
  const drift = driftOf(state, k);
  if (state.climbing[k] !== 0) return state.calm[k] === 0 && drift >= CALM_SPREADS * state.spread[k];
  return state.cusum[k] <= DECISION_INTERVAL || drift < driftLimit(state.spread[k]);
}

function watch(state: DriftState, k: number, g: number, buildId: number, news: DriftNews): void {
  const drift = g / STEPS_PER_DECADE - state.centre[k];
  const limit = driftLimit(state.spread[k]);
  const before = state.last[k];
  const beyond = state.standing[k] === STANDING.beyond;
  const suspected = state.cusum[k] > SUSPICION;
  if (state.count[k] >= YOUNG_BUILDS) {
    accumulate(state, k, drift / state.spread[k], beyond, buildId);
    if (state.climbing[k] !== 0) {
      if (settles(state, k, drift)) {
        endClimb(state, k, drift, news);
        return;
      }
    } else if (
      state.cusum[k] > DECISION_INTERVAL &&
      isHigh(drift, before / STEPS_PER_DECADE - state.centre[k], limit)
    ) {
      state.climbing[k] = 1;
      tell(news.climbs, k, state.onset[k], drift);
      return;
    }
  }
  const rise = (g - before) / STEPS_PER_DECADE;
  if (beyond && !suspected && drift >= limit && rise >= jumpLimit(state.count[k], state.spread[k]))
    tell(news.jumps, k, buildId, rise);
}

function accumulate(state: DriftState, k: number, z: number, beyond: boolean, buildId: number): void {
  const old = state.cusum[k];
  state.cusum[k] = nextCusum(old, z, beyond);
  if (state.climbing[k] !== 0) return;
  if (state.cusum[k] === 0) state.onset[k] = 0;
  else if (old === 0) state.onset[k] = buildId;
}

/** Counts the calm builds of a climb; true when there are enough of them. */
function settles(state: DriftState, k: number, drift: number): boolean {
  state.calm[k] = drift < CALM_SPREADS * state.spread[k] ? state.calm[k] + 1 : 0;
  return state.calm[k] >= CALM_BUILDS;
}

/** Ends a climb; S begins anew. */
function endClimb(state: DriftState, k: number, drift: number, news: DriftNews): void {
  tell(news.ends, k, state.onset[k], drift);
  state.climbing[k] = 0;
  state.calm[k] = 0;
  state.cusum[k] = 0;
  state.onset[k] = 0;
}
