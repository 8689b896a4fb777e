import { newDriftState } from "./newDriftState.ts";
import { BASELINE_BUILDS } from "./rules.ts";
import type { DriftState } from "./types.ts";

/**
 * Drift state of a block that has another number of rows now: entries keep their state by index, new ones have none.
 * The number of columns must be the same, or an index would be another entry.
 *
 * Shapes: the result has `entries` elements and shares nothing with `state`. Throws: RangeError if `entries` is no
 * whole number >= 0.
 */
export function resizeDrift(state: DriftState, entries: number): DriftState {
  const resized = newDriftState(entries);
  const kept = Math.min(entries, state.count.length);
  resized.count.set(state.count.subarray(0, kept));
  resized.standing.set(state.standing.subarray(0, kept));
  resized.last.set(state.last.subarray(0, kept));
  resized.centre.set(state.centre.subarray(0, kept));
  resized.spread.set(state.spread.subarray(0, kept));
  resized.cusum.set(state.cusum.subarray(0, kept));
  resized.onset.set(state.onset.subarray(0, kept));
  resized.climbing.set(state.climbing.subarray(0, kept));
  resized.calm.set(state.calm.subarray(0, kept));
  resized.awake.set(state.awake.subarray(0, kept));
  if (state.window !== null) {
    resized.window = new Int16Array(entries * BASELINE_BUILDS);
    resized.window.set(state.window.subarray(0, kept * BASELINE_BUILDS));
  }
  return resized;
}
