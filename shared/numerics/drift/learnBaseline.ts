import { BASELINE_BUILDS, spreadOf, STEPS_PER_DECADE } from "./rules.ts";
import { sortedDeviation } from "../robust/sortedDeviation.ts";
import type { DriftState } from "./types.ts";

/**
 * Lets the baseline of entry k learn g from so many builds, as far as it has room, and measures centre and spread anew.
 *
 * Units: g in steps. Throws: never. Cost: up to BASELINE_BUILDS moves and as many comparisons; the window of the block
 * is allocated when the first entry begins.
 */
export function learnBaseline(state: DriftState, k: number, g: number, times: number): void {
  const window = (state.window ??= new Int16Array(state.count.length * BASELINE_BUILDS));
  const from = k * BASELINE_BUILDS;
  const end = from + Math.min(BASELINE_BUILDS, state.count[k] + times);
  for (let next = from + state.count[k]; next < end; next += 1) insert(window, from, next, g);
  const n = end - from;
  state.count[k] = n;
  const middle = window[from + ((n - 1) >> 1)] + window[from + (n >> 1)];
  const mad = sortedDeviation(window, from, n);
  state.centre[k] = middle / 2 / STEPS_PER_DECADE;
  state.spread[k] = spreadOf(n, mad / STEPS_PER_DECADE);
}

/** Puts g in its place among the ascending numbers from..next. */
function insert(window: Int16Array, from: number, next: number, g: number): void {
  let place = next;
  while (place > from && window[place - 1] > g) {
    window[place] = window[place - 1];
    place -= 1;
  }
  window[place] = g;
}
