import type { Evidence, Place } from "./types.ts";

/** The narrowest of block, row, column and entry that holds all of `entries`. A row or column that is all of the block is the block. */
export function placeOf({ rows, columns }: Pick<Evidence, "rows" | "columns">, entries: Int32Array): Place {
  const first = entries[0];
  if (entries.length === 1) {
    return { scope: "entry", row: Math.floor(first / columns), column: first % columns };
  }
  const row = Math.floor(first / columns);
  const column = first % columns;
  // Ascending: all are in the row of the first exactly when the last is.
  const oneRow = entries[entries.length - 1] < (row + 1) * columns;
  if (oneRow && rows > 1) return { scope: "row", row, column: null };
  if (!oneRow && columns > 1 && entries.every((k) => k % columns === column))
    return { scope: "column", row: null, column };
  return { scope: "block", row: null, column: null };
}

/** How many of `entries` are in the place. */
export function countIn(place: Place, columns: number, entries: Int32Array): number {
  if (place.scope === "block") return entries.length;
  let count = 0;
  for (const k of entries) count += Number(isIn(place, columns, k));
  return count;
}

/** True where entry k is in the place. */
export function isIn({ row, column }: Pick<Place, "row" | "column">, columns: number, k: number): boolean {
  return (row === null || Math.floor(k / columns) === row) && (column === null || k % columns === column);
}
