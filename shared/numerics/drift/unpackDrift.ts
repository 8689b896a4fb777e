import { newDriftState } from "./newDriftState.ts";
import { PACKED_HEADER, PACKED_VERSION, stateArrays } from "./packedDrift.ts";
import { BASELINE_BUILDS } from "./rules.ts";
import type { DriftState } from "./types.ts";

/**
 * Drift state from the bytes of `packDrift`, which may lie anywhere in their buffer; the result shares nothing with
 * them. Throws: RangeError where the version is unknown or the length is not that of the entries.
 */
export function unpackDrift(bytes: Uint8Array): DriftState {
  if (bytes.length < PACKED_HEADER) throw new RangeError(`bytes: ${bytes.length}, expected a header`);
  const [version, entries, hasWindow] = new Uint32Array(bytes.slice(0, PACKED_HEADER).buffer);
  if (version !== PACKED_VERSION) throw new RangeError(`bytes: version ${version}, expected ${PACKED_VERSION}`);
  if (entries > bytes.length) throw new RangeError(`bytes: ${bytes.length}, too few for ${entries} entries`);
  const state = newDriftState(entries);
  if (hasWindow !== 0) state.window = new Int16Array(entries * BASELINE_BUILDS);
  const arrays = stateArrays(state);
  const expected = arrays.reduce((sum, array) => sum + array.byteLength, PACKED_HEADER);
  if (expected !== bytes.length) throw new RangeError(`bytes: ${bytes.length}, expected ${expected}`);
  let at = PACKED_HEADER;
  for (const array of arrays) {
    new Uint8Array(array.buffer).set(bytes.subarray(at, at + array.byteLength));
    at += array.byteLength;
  }
  return state;
}
