/**
 * A small seeded generator of numbers in [0, 1), so that a random test fails the same way twice.
 * Source: mulberry32, T. Ettinger, 2017 (public domain).
 */
export function mulberry32(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** A whole number in [low, high], both included. */
export function integerBetween(random: () => number, low: number, high: number): number {
  return low + Math.floor(random() * (high - low + 1));
}

/** A copy in random order (R. Durstenfeld, Algorithm 235, Comm. ACM 7(7), 1964). */
export function shuffled<T>(random: () => number, items: readonly T[]): T[] {
  const copy = items.slice();
  for (let last = copy.length - 1; last > 0; last--) {
    const other = integerBetween(random, 0, last);
    [copy[last], copy[other]] = [copy[other]!, copy[last]!];
  }
  return copy;
}
