/** The part of the entries of a trial that a candidate must explain. */
export const LEAST_SHARE = 0.8;

/** Entries looked at before all are: what is far from explaining these is given up. */
const SAMPLE = 512;

export interface Explanation {
  readonly explained: Int32Array;
  /** The other entries. */
  readonly rest: Int32Array;
}

/**
 * The entries that `fits` holds for, or null where they are fewer than `LEAST_SHARE` of all. Evenly spread entries are
 * tried first, so that a candidate that is far off costs nothing whatever the size of the block.
 */
export function explain(entries: Int32Array, fits: (k: number) => boolean): Explanation | null {
  if (entries.length === 0 || isFar(entries, fits)) return null;
  const explained = new Int32Array(entries.length);
  const rest = new Int32Array(entries.length);
  const most = Math.floor(entries.length * (1 - LEAST_SHARE) + 1e-9);
  let hits = 0;
  let misses = 0;
  for (const k of entries) {
    if (fits(k)) explained[hits++] = k;
    else if (misses === most) return null;
    else rest[misses++] = k;
  }
  return { explained: explained.subarray(0, hits), rest: rest.subarray(0, misses) };
}

/** Entries of the sample that do not fit may be a little more than the rest allows, as it is a sample. */
function isFar(entries: Int32Array, fits: (k: number) => boolean): boolean {
  if (entries.length <= 2 * SAMPLE) return false;
  let misses = 0;
  for (const k of sampleOf(entries)) misses += Number(!fits(k));
  return misses > SAMPLE * (1 - LEAST_SHARE + 0.1);
}

/** At most `SAMPLE` entries, evenly spread. */
export function sampleOf(entries: Int32Array): Int32Array {
  if (entries.length <= SAMPLE) return entries;
  return Int32Array.from({ length: SAMPLE }, (_, s) => entries[Math.floor((s * entries.length) / SAMPLE)]);
}

/** What is in `entries` and not in `taken`; both ascending. */
export function without(entries: Int32Array, taken: Int32Array): Int32Array {
  const left = new Int32Array(entries.length);
  let count = 0;
  let at = 0;
  for (const k of entries) {
    while (at < taken.length && taken[at] < k) at += 1;
    if (taken[at] !== k) left[count++] = k;
  }
  return left.subarray(0, count);
}
