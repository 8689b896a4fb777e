import { PACKED_HEADER, PACKED_VERSION, stateArrays } from "./packedDrift.ts";
import type { DriftState } from "./types.ts";

/**
 * Bytes of a drift state, for storing; `unpackDrift` is the inverse.
 *
 * Layout, little-endian as every machine that runs Node.js for us: uint32 version, entries, 1 if there is a window;
 * then the arrays of `stateArrays` one after another, wider elements first, then the window.
 * Cost: 23 bytes an entry, 63 while baselines are young; one copy.
 */
export function packDrift(state: DriftState): Uint8Array {
  const arrays = stateArrays(state);
  const length = arrays.reduce((sum, array) => sum + array.byteLength, PACKED_HEADER);
  const bytes = new Uint8Array(length);
  bytes.set(bytesOf(Uint32Array.of(PACKED_VERSION, state.count.length, state.window === null ? 0 : 1)));
  let at = PACKED_HEADER;
  for (const array of arrays) {
    bytes.set(bytesOf(array), at);
    at += array.byteLength;
  }
  return bytes;
}

function bytesOf(array: ArrayBufferView): Uint8Array {
  return new Uint8Array(array.buffer, array.byteOffset, array.byteLength);
}
