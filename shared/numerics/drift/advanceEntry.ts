import type { DriftNews } from "./driftNews.ts";
import { tell } from "./driftNews.ts";
import { learnBaseline } from "./learnBaseline.ts";
import {
  ALLOWANCE,
  BASELINE_BUILDS,
  CALM_BUILDS,
  CALM_SPREADS,
  DECISION_INTERVAL,
  JUMP_SPREADS,
  LEARNING_LIMIT,
  LEAST_DECADES,
  LEAST_SPREADS,
  STEPS_PER_DECADE,
  WINSOR,
  YOUNG_BUILDS,
} from "./rules.ts";
import type { DriftState } from "./types.ts";
import { STANDING } from "./types.ts";

/**
 * One build of entry k that told g (in steps), `state.last` still being that of the build before: the rules of
 * `driftSeries`, in place.
 */
export function advanceEntry(
  state: DriftState,
  k: number,
  g: number,
  standing: number,
  buildId: number,
  news: DriftNews,
): void {
  const count = state.count[k];
  if (count > 0) watch(state, k, g, standing, buildId, news);
  const suspect = count >= YOUNG_BUILDS && state.cusum[k] > LEARNING_LIMIT;
  if (count < BASELINE_BUILDS && !suspect) learnBaseline(state, k, g, 1);
  state.last[k] = g;
}

function watch(state: DriftState, k: number, g: number, standing: number, buildId: number, news: DriftNews): void {
  const drift = g / STEPS_PER_DECADE - state.centre[k];
  const spread = state.spread[k];
  const limit = Math.max(LEAST_DECADES, LEAST_SPREADS * spread);
  const before = state.last[k];
  if (state.count[k] >= YOUNG_BUILDS) {
    accumulate(state, k, drift / spread, standing, buildId);
    if (state.climbing[k] !== 0) {
      settle(state, k, drift, news);
    } else if (state.cusum[k] > DECISION_INTERVAL && climbs(state, k, g, before, limit)) {
      state.climbing[k] = 1;
      tell(news.climbs, k, state.onset[k], drift);
      return;
    }
  }
  const rise = (g - before) / STEPS_PER_DECADE;
  if (standing === STANDING.beyond && drift >= limit && rise >= Math.max(LEAST_DECADES, JUMP_SPREADS * spread))
    tell(news.jumps, k, buildId, rise);
}

/** The mean drift of this build and the one before is worth telling: one lucky build does not make a climb. */
function climbs(state: DriftState, k: number, g: number, before: number, limit: number): boolean {
  return (g + before) / 2 / STEPS_PER_DECADE - state.centre[k] >= limit;
}

function accumulate(state: DriftState, k: number, z: number, standing: number, buildId: number): void {
  const bounded = Math.max(-WINSOR, Math.min(standing === STANDING.beyond ? WINSOR : 0, z));
  const old = state.cusum[k];
  state.cusum[k] = Math.max(0, old + bounded - ALLOWANCE);
  if (state.climbing[k] !== 0) return;
  if (state.cusum[k] === 0) state.onset[k] = 0;
  else if (old === 0) state.onset[k] = buildId;
}

/** Ends a climb that has been calm for long enough; S begins anew. */
function settle(state: DriftState, k: number, drift: number, news: DriftNews): void {
  state.calm[k] = drift < CALM_SPREADS * state.spread[k] ? state.calm[k] + 1 : 0;
  if (state.calm[k] < CALM_BUILDS) return;
  tell(news.ends, k, state.onset[k], drift);
  state.climbing[k] = 0;
  state.calm[k] = 0;
  state.cusum[k] = 0;
  state.onset[k] = 0;
}
