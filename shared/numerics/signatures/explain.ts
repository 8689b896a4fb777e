/** The part of the entries of a trial that a candidate must explain. */
export const LEAST_SHARE = 0.8;

/** Entries looked at before all are: what is far from explaining these is given up. */
const SAMPLE = 64;
/** Misses among them that 0.8 of all leaves room for, but for one case in 100,000 (binomial). */
const MOST_MISSES = 28;

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

function isFar(entries: Int32Array, fits: (k: number) => boolean): boolean {
  if (entries.length <= 2 * SAMPLE) return false;
  let misses = 0;
  for (let s = 0; s < SAMPLE && misses <= MOST_MISSES; s += 1) misses += Number(!fits(sampled(entries, s)));
  return misses > MOST_MISSES;
}

/** Number s of `SAMPLE` evenly spread entries. */
function sampled(entries: Int32Array, s: number): number {
  return entries[Math.floor(((s + 0.5) * entries.length) / SAMPLE)];
}

/** At most `SAMPLE` entries, evenly spread. */
export function sampleOf(entries: Int32Array): Int32Array {
  if (entries.length <= SAMPLE) return entries;
  const sample = new Int32Array(SAMPLE);
  for (let s = 0; s < SAMPLE; s += 1) sample[s] = sampled(entries, s);
  return sample;
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
