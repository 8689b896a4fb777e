import type { DriftState } from "./types.ts";
import { STANDING } from "./types.ts";

/**
 * A new baseline was accepted: the entries (null = all) learn their baseline anew from the next build on, and their
 * climbs end. What the newest build told stays known, so that a build that repeats it can be counted; a jump is not
 * told across the restart.
 *
 * Shapes: `state` is changed in place; the result lists the entries whose climb ended, in the order given.
 * Throws: RangeError naming an entry that is not in the block; nothing is changed then.
 */
export function restartDrift(state: DriftState, entries: Uint32Array | null): Uint32Array {
  const total = state.count.length;
  const chosen = entries ?? Uint32Array.from({ length: total }, (_, k) => k);
  for (const k of chosen) {
    if (k >= total) throw new RangeError(`entries: ${k} is not in a block of ${total}`);
  }
  const ended = chosen.filter((k) => state.climbing[k] === 1);
  for (const k of chosen) {
    state.count[k] = 0;
    state.centre[k] = 0;
    state.spread[k] = 0;
    state.cusum[k] = 0;
    state.onset[k] = 0;
    state.climbing[k] = 0;
    state.calm[k] = 0;
    state.awake[k] = state.standing[k] === STANDING.silent ? 0 : 1;
  }
  return ended;
}
