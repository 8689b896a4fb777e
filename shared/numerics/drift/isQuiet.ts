import { driftOf, repeatedCusum } from "./advanceEntry.ts";
import { BASELINE_BUILDS, CALM_SPREADS, driftLimit, SUSPICION } from "./rules.ts";
import type { DriftState } from "./types.ts";

/**
 * True when repeating the newest build's numbers for ever can tell no event and begin no onset: then so many builds can
 * be taken at once.
 *
 * Per entry: repeats change nothing (`awake` 0); or the baseline is young, S is 0 and z <= 0, which stays so, as
 * repeats pull the centre towards g and never below it; or the baseline learns no more, S is above 0, and the drift is
 * too small to be told, or of a climb under way too large to end it.
 *
 * Cost: one pass, nothing allocated; stops at the first entry that is not quiet.
 */
export function isQuiet(state: DriftState): boolean {
  const { awake } = state;
  for (let k = 0; k < awake.length; k += 1) {
    if (awake[k] !== 0 && !isQuietEntry(state, k)) return false;
  }
  return true;
}

function isQuietEntry(state: DriftState, k: number): boolean {
  const drift = driftOf(state, k);
  if (state.climbing[k] !== 0) return drift >= CALM_SPREADS * state.spread[k];
  const frozen = state.cusum[k] > SUSPICION && repeatedCusum(state, k) >= state.cusum[k];
  if (state.count[k] === BASELINE_BUILDS || frozen) return state.cusum[k] > 0 && drift < driftLimit(state.spread[k]);
  return state.cusum[k] === 0 && (drift <= 0 || state.count[k] === 0);
}
