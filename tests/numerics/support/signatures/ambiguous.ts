import type { Plant, Truth } from "./plant.ts";

type Kind = Plant["code"];
type Picture = readonly [Kind, (k: number) => number];

/** What simple mistakes would make of the right Jacobian, entry by entry. */
function pictures({ rows, columns, values }: Truth): Picture[] {
  const at = (row: number, column: number) => values[row * columns + column] ?? NaN;
  const row = (k: number) => Math.floor(k / columns);
  const column = (k: number) => k % columns;
  const found: Picture[] = [
    ["sign-flipped", (k) => -(values[k] ?? NaN)],
    ["term-missing", () => 0],
    ["rows-reordered", (k) => at(rows - 1 - row(k), column(k))],
    ["columns-reordered", (k) => at(row(k), columns - 1 - column(k))],
  ];
  if (rows === columns) found.push(["transposed", (k) => at(column(k), row(k))]);
  else {
    found.push(["storage-order", (k) => at(k % rows, Math.floor(k / rows))]);
    found.push(["storage-order", (k) => values[column(k) * rows + row(k)] ?? NaN]);
  }
  for (let by = 1; by < rows; by += 1) found.push(["rows-reordered", (k) => at((row(k) + by) % rows, column(k))]);
  for (let by = 1; by < columns; by += 1) {
    found.push(["columns-reordered", (k) => at(row(k), (column(k) + by) % columns)]);
  }
  const swapped = (line: number, a: number, b: number) => (line === a ? b : line === b ? a : line);
  for (let b = 1; b < Math.max(rows, columns); b += 1) {
    for (let a = 0; a < b; a += 1) {
      if (b < rows) found.push(["rows-reordered", (k) => at(swapped(row(k), a, b), column(k))]);
      if (b < columns) found.push(["columns-reordered", (k) => at(row(k), swapped(column(k), a, b))]);
    }
  }
  return found;
}

/**
 * True where a mistake of another kind, no less simple, makes the same numbers where they are seen to be wrong: then
 * nobody could tell which one was made.
 */
export function isAmbiguous(
  truth: Truth,
  plant: Plant,
  seen: readonly number[],
  slack: (k: number) => number,
): boolean {
  return pictures(truth).some(
    ([code, picture]) =>
      code !== plant.code && seen.every((k) => Math.abs((plant.derivative[k] ?? NaN) - picture(k)) <= slack(k)),
  );
}
