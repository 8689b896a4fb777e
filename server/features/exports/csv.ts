/** What a cell of a table holds; null is an empty cell. */
export type Cell = string | number | boolean | null;

const PLAIN_NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?$/i;
/** What makes a spreadsheet take a text for a formula, in its wide forms too (CWE-1236). */
const RUN_AT = /^[=+\-@\t\r\n\0\uff1d\uff0b\uff0d\uff20]/;

/**
 * One line of comma-separated values, its end included (RFC 4180): cells with commas, quotes or line ends are quoted,
 * quotes in them doubled. Numbers have the shortest digits that read back as the same binary64 number; NaN, Infinity
 * and -Infinity are words. A text that a spreadsheet would run gets an apostrophe before it, unless it is a plain
 * number.
 */
export function csvLine(cells: readonly Cell[]): string {
  return `${cells.map(csvCell).join(",")}\r\n`;
}

function csvCell(cell: Cell): string {
  if (cell === null) return "";
  if (typeof cell === "number") return Object.is(cell, -0) ? "-0" : String(cell);
  if (typeof cell === "boolean") return cell ? "true" : "false";
  const safe = RUN_AT.test(cell) && !PLAIN_NUMBER.test(cell) ? `'${cell}` : cell;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
