import type { Evidence, Place } from "./types.ts";

/**
 * The narrowest of block, row, column and entry that holds all of `entries` (ascending). A row or column that is all of
 * the block is the block.
 */
export function placeOf({ rows, columns }: Pick<Evidence, "rows" | "columns">, entries: Int32Array): Place {
  const row = Math.floor(entries[0] / columns);
  const column = entries[0] % columns;
  if (entries.length === 1) return { scope: "entry", row, column };
  // Ascending: all are in the row of the first exactly when the last is.
  if (entries[entries.length - 1] < (row + 1) * columns) {
    return rows > 1 ? { scope: "row", row, column: null } : BLOCK;
  }
  return columns > 1 && entries.every((k) => k % columns === column) ? { scope: "column", row: null, column } : BLOCK;
}

const BLOCK: Place = { scope: "block", row: null, column: null };

/** How many of some entries are in a place. */
export type Counting = (place: Place) => number;

/** Counts `entries` by row and by column once, for any number of questions. */
export function countingOf({ rows, columns }: Pick<Evidence, "rows" | "columns">, entries: Int32Array): Counting {
  const inRow = new Int32Array(rows);
  const inColumn = new Int32Array(columns);
  for (const k of entries) {
    const row = Math.floor(k / columns);
    inRow[row] = inRow[row] + 1;
    const column = k - row * columns;
    inColumn[column] = inColumn[column] + 1;
  }
  return ({ scope, row, column }) => {
    if (scope === "block") return entries.length;
    if (scope === "entry") return 1;
    return row === null ? inColumn[column ?? 0] : inRow[row];
  };
}
