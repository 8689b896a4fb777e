import type { DriftState } from "./types.ts";

export const PACKED_VERSION = 1;
/** Bytes before the arrays: version, entries, whether there is a window. */
export const PACKED_HEADER = 12;

type StateArray = Float32Array | Int32Array | Int16Array | Uint8Array;

/** The arrays of a state in the order they are stored in. */
export function stateArrays(state: DriftState): StateArray[] {
  const { centre, spread, cusum, onset, last, count, standing, climbing, calm, awake, window } = state;
  const own = [centre, spread, cusum, onset, last, count, standing, climbing, calm, awake];
  return window === null ? own : [...own, window];
}
