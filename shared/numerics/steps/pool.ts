import type { Pooled } from "./types.ts";

/** Numbers gathered over the rows of a column, in an array that is used again for the next column. */
export interface Pool {
  readonly values: Float64Array;
  count: number;
}

export function newPool(room: number): Pool {
  return { values: new Float64Array(room), count: 0 };
}

/** Adds a number; what overflowed on the way to it (NaN) counts as +Infinity. */
export function gather(pool: Pool, value: number): void {
  pool.values[pool.count] = value === value ? value : Infinity;
  pool.count += 1;
}

/**
 * Median of what was gathered, the mean of the middle two for an even count.
 * NaN policy: 0 for an empty pool. Accuracy: one rounding; does not overflow. Cost: sorts the pool in place.
 */
export function medianOf({ values, count }: Pool): number {
  if (count === 0) return 0;
  const sorted = values.subarray(0, count).sort();
  const upper = sorted[count >> 1];
  return count % 2 === 1 ? upper : sorted[(count >> 1) - 1] / 2 + upper / 2;
}

/** Median and largest of what was gathered; 0 for an empty pool. */
export function pooled(pool: Pool): Pooled {
  const median = medianOf(pool);
  return { median, largest: pool.count === 0 ? 0 : pool.values[pool.count - 1] };
}

/** u / size, where 0/0 is 0 and anything else over 0 +Infinity. */
export function relativeTo(size: number, u: number): number {
  return u === 0 ? 0 : u / size;
}
