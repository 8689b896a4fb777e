import type { DriftState } from "./types.ts";

/**
 * Drift state of a block of which nothing is known.
 *
 * Shapes: one element an entry. Throws: RangeError if `entries` is no whole number >= 0.
 */
export function newDriftState(entries: number): DriftState {
  if (!Number.isInteger(entries) || entries < 0) throw new RangeError(`entries: ${entries}, expected a whole number`);
  return {
    count: new Uint8Array(entries),
    standing: new Uint8Array(entries),
    last: new Int16Array(entries),
    centre: new Float32Array(entries),
    spread: new Float32Array(entries),
    cusum: new Float32Array(entries),
    onset: new Int32Array(entries),
    climbing: new Uint8Array(entries),
    calm: new Uint8Array(entries),
    awake: new Uint8Array(entries),
    window: null,
  };
}
