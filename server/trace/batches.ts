/** Cuts a list into runs whose sizes add up to at most `most`; what is larger alone is a run of its own. */
export function batches<T>(items: readonly T[], sizeOf: (item: T) => number, most: number): T[][] {
  const runs: T[][] = [];
  let room = 0;
  for (const item of items) {
    const size = sizeOf(item);
    if (runs.length === 0 || size > room) {
      runs.push([]);
      room = most;
    }
    runs.at(-1)?.push(item);
    room -= size;
  }
  return runs;
}

/** Entries that one task of the judge's workers may hold: small blocks go together, a large one alone. */
export const BATCH_ENTRIES = 262_144;
