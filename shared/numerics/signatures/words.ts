import { powerOfTen } from "../../domain/powerOfTen.ts";
import { isKnown } from "./slack.ts";
import type { Evidence, Place, SideNames } from "./types.ts";

/** `2 (pitch)`: an index as pages show it, with the element's own name where it has one. */
export function lineName(side: SideNames, size: number, index: number): string {
  const name = side.elements?.[index] ?? (size === 1 ? side.name : `${side.name}[${index}]`);
  return `${index} (${name})`;
}

/** A number as it is said in a sentence: six digits, no trailing zeros. */
export function inWords(value: number): string {
  const [digits, exponent] = value.toPrecision(6).split("e");
  const short = digits.includes(".") ? digits.replace(/\.?0+$/, "") : digits;
  return exponent === undefined ? short : `${short} × ${powerOfTen(Number(exponent))}`;
}

/** `1, 2 and 5`. */
export function listed(parts: readonly string[]): string {
  return parts.length < 2 ? parts.join("") : `${parts.slice(0, -1).join(", ")} and ${parts[parts.length - 1]}`;
}

/** What a sentence is about, with its verb: `Column 2 (pitch) is`, `3 of 12 entries are`. */
export function subject(evidence: Evidence, place: Place, explained: Int32Array): string {
  const { rows, columns, names } = evidence;
  const { scope, row, column } = place;
  const rowName = (at: number) => lineName(names.output, rows, at);
  const columnName = (at: number) => lineName(names.input, columns, at);
  if (scope === "entry") return `Row ${rowName(row ?? 0)}, column ${columnName(column ?? 0)} is`;
  if (scope === "row")
    return lineSubject(evidence, explained, `row ${rowName(row ?? 0)}`, (row ?? 0) * columns, 1, columns);
  if (scope === "column")
    return lineSubject(evidence, explained, `column ${columnName(column ?? 0)}`, column ?? 0, columns, rows);
  const count = explained.length;
  if (count === rows * columns) return "The whole block is";
  const inColumns = fewLines(explained, columns, (k) => k % columns);
  if (inColumns !== null) return `Columns ${listed(inColumns.map(columnName))} are`;
  const inRows = fewLines(explained, rows, (k) => Math.floor(k / columns));
  if (inRows !== null) return `Rows ${listed(inRows.map(rowName))} are`;
  return `${count} of ${rows * columns} entries are`;
}

/** A whole line where all of it that is not 0 is meant, else how many of its entries. */
function lineSubject(
  evidence: Evidence,
  explained: Int32Array,
  line: string,
  start: number,
  stride: number,
  length: number,
): string {
  let known = 0;
  for (let p = 0; p < length; p += 1) known += Number(isKnown(evidence, start + p * stride));
  if (explained.length >= known) return `${line.charAt(0).toUpperCase()}${line.slice(1)} is`;
  return `${explained.length} of ${length} entries of ${line} are`;
}

/** The two or three lines that hold all entries, where each holds several and there are more lines. */
function fewLines(explained: Int32Array, lines: number, lineOf: (k: number) => number): number[] | null {
  const found = new Set<number>();
  for (const k of explained) {
    found.add(lineOf(k));
    if (found.size > 3) return null;
  }
  return found.size < lines && explained.length >= 2 * found.size ? [...found].sort((a, b) => a - b) : null;
}
