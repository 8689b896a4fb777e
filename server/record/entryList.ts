/** Flat row-major indices of entries, ascending, as little-endian 32-bit numbers. */
export function packEntries(entries: Uint32Array): Buffer {
  return Buffer.from(entries.buffer, entries.byteOffset, entries.byteLength);
}

export function unpackEntries(packed: Buffer): Uint32Array {
  return new Uint32Array(new Uint8Array(packed).buffer);
}

/** Union of two ascending lists; `a` itself where `b` adds nothing. */
export function unionEntries(a: Uint32Array, b: Uint32Array): Uint32Array {
  const union = new Uint32Array(a.length + b.length);
  let size = 0;
  for (let i = 0, j = 0; i < a.length || j < b.length;) {
    const next = j >= b.length || (i < a.length && a[i] <= b[j]) ? a[i] : b[j];
    if (a[i] === next) i += 1;
    if (b[j] === next) j += 1;
    union[size++] = next;
  }
  return size === a.length ? a : union.slice(0, size);
}

/** How many entries two ascending lists share. */
export function sharedEntries(a: Uint32Array, b: Uint32Array): number {
  let shared = 0;
  for (let i = 0, j = 0; i < a.length && j < b.length;) {
    if (a[i] === b[j]) {
      shared += 1;
      i += 1;
      j += 1;
    } else if (a[i] < b[j]) i += 1;
    else j += 1;
  }
  return shared;
}
