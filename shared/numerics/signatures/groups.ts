import type { Evidence } from "./types.ts";

/** `entries` (ascending) by row, at most `most` rows of at least two entries. */
export function byRow({ columns }: Pick<Evidence, "columns">, entries: Int32Array, most: number): Int32Array[] {
  return split(entries, (k) => Math.floor(k / columns), most);
}

/** `entries` by column, at most `most` columns of at least two entries; ascending within each. */
export function byColumn({ columns }: Pick<Evidence, "columns">, entries: Int32Array, most: number): Int32Array[] {
  const starts = new Int32Array(columns + 1);
  for (const k of entries) starts[(k % columns) + 1] = starts[(k % columns) + 1] + 1;
  for (let column = 0; column < columns; column += 1) starts[column + 1] = starts[column + 1] + starts[column];
  const sorted = new Int32Array(entries.length);
  for (const k of entries) {
    const column = k % columns;
    sorted[starts[column]] = k;
    starts[column] = starts[column] + 1;
  }
  return split(sorted, (k) => k % columns, most);
}

/** Runs of entries with the same line. */
function split(entries: Int32Array, lineOf: (k: number) => number, most: number): Int32Array[] {
  const groups: Int32Array[] = [];
  for (let start = 0; start < entries.length && groups.length < most;) {
    const line = lineOf(entries[start]);
    let end = start + 1;
    while (end < entries.length && lineOf(entries[end]) === line) end += 1;
    if (end - start > 1) groups.push(entries.subarray(start, end));
    start = end;
  }
  return groups;
}
