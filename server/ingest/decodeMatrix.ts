import type { Complaints, Path } from "./complaints.ts";
import { ExtractedMatrix } from "./extractMatrices.ts";
import { decodeBase64Numbers } from "./decodeVector.ts";
import { readNumber } from "./readNumber.ts";
import type { NumberRule } from "./readNumber.ts";

export interface Shape {
  readonly rows: number;
  readonly columns: number;
}

export interface DecodedMatrix {
  /** rows x columns, row-major; NaN where the rule allows null and null was sent. */
  readonly values: Float64Array;
  /** Values that were sent as NaN or an infinity. */
  readonly notFinite: number;
}

/**
 * Reads a matrix in any of its three forms into one array. What is wrong is added to `complaints`, at most a few lines
 * a matrix; the numbers returned are then of no use.
 * `f64le` says nothing of null: a NaN in it is a value that is not finite.
 */
export function decodeMatrix(
  posted: unknown,
  shape: Shape,
  rule: NumberRule,
  path: Path,
  complaints: Complaints,
): DecodedMatrix {
  if (posted instanceof ExtractedMatrix) return extracted(posted, shape, path, complaints);
  if (Array.isArray(posted)) return denseRows(posted, shape, rule, path, complaints);
  if (typeof posted === "object" && posted !== null) {
    const keys = Object.keys(posted).sort().join(" ");
    if (keys === "f64le") {
      const sent = (posted as { f64le: unknown }).f64le;
      const values = decodeBase64Numbers(sent, shape.rows * shape.columns, [...path, "f64le"], complaints);
      return { values, notFinite: checkBinary(values, rule, path, complaints) };
    }
    if (keys === "columns rows values") {
      return sparse(posted as Triplets, shape, rule, path, complaints);
    }
  }
  complaints.add(path, 'must be rows of numbers, {"f64le": "..."} or {"rows": [], "columns": [], "values": []}');
  return empty(shape);
}

function empty(shape: Shape): DecodedMatrix {
  return { values: new Float64Array(shape.rows * shape.columns), notFinite: 0 };
}

/** Rows that were read from the bytes already: only their number and length are left to be checked. */
function extracted(posted: ExtractedMatrix, shape: Shape, path: Path, complaints: Complaints): DecodedMatrix {
  if (posted.rows !== shape.rows) {
    const fits = posted.rows === shape.columns && posted.columns === shape.rows;
    complaints.add(path, `has ${posted.rows} rows, expected ${shape.rows}${fits ? TRANSPOSED : ""}`);
    return empty(shape);
  }
  if (posted.columns !== shape.columns) {
    complaints.add(path, `row 0 has ${posted.columns} numbers, expected ${shape.columns}`);
    return empty(shape);
  }
  return { values: posted.values, notFinite: 0 };
}

const TRANSPOSED = " (its transpose would fit: rows are output elements, columns are input elements)";

function denseRows(
  posted: readonly unknown[],
  shape: Shape,
  rule: NumberRule,
  path: Path,
  complaints: Complaints,
): DecodedMatrix {
  const { rows, columns } = shape;
  const { values } = empty(shape);
  if (posted.length !== rows) {
    complaints.add(path, `has ${posted.length} rows, expected ${rows}${swapped(posted, shape)}`);
    return { values, notFinite: 0 };
  }
  let notFinite = 0;
  for (let row = 0; row < rows; row++) {
    const line: unknown = posted[row];
    if (!Array.isArray(line)) {
      complaints.add([...path, row], "must be an array of numbers");
      return { values, notFinite };
    }
    if (line.length !== columns) {
      complaints.add(path, `row ${row} has ${line.length} numbers, expected ${columns}`);
      return { values, notFinite };
    }
    const start = row * columns;
    for (let column = 0; column < columns; column++) {
      const value: unknown = line[column];
      if (typeof value === "number" && Number.isFinite(value) && !(value < 0 && rule.notNegative)) {
        values[start + column] = value;
        continue;
      }
      const read = readNumber(value, rule);
      if (read.wrong !== null) {
        complaints.add([...path, row, column], read.wrong);
        return { values, notFinite };
      }
      values[start + column] = read.value;
      if (value !== null) notFinite += 1;
    }
  }
  return { values, notFinite };
}

/** A hint where the rows fit the columns: the matrix was probably sent the other way round. */
function swapped(posted: readonly unknown[], shape: Shape): string {
  const first = posted[0];
  const fits = posted.length === shape.columns && Array.isArray(first) && first.length === shape.rows;
  return fits ? TRANSPOSED : "";
}

function checkBinary(values: Float64Array, rule: NumberRule, path: Path, complaints: Complaints): number {
  let notFinite = 0;
  for (let at = 0; at < values.length; at++) {
    const value = values[at];
    if (Number.isFinite(value) && (value >= 0 || !rule.notNegative)) continue;
    if (rule.notNegative && !(value >= 0)) {
      complaints.add(path, `number ${at} is ${value}, expected one that is not negative`);
      return notFinite;
    }
    notFinite += 1;
  }
  return notFinite;
}

interface Triplets {
  readonly rows: unknown;
  readonly columns: unknown;
  readonly values: unknown;
}

function sparse(posted: Triplets, shape: Shape, rule: NumberRule, path: Path, complaints: Complaints): DecodedMatrix {
  const result = empty(shape);
  const { rows, columns, values } = posted;
  if (!Array.isArray(rows) || !Array.isArray(columns) || !Array.isArray(values)) {
    complaints.add(path, "rows, columns and values must be arrays");
    return result;
  }
  if (rows.length !== columns.length || rows.length !== values.length) {
    const lengths = `${rows.length}, ${columns.length} and ${values.length}`;
    complaints.add(path, `rows, columns and values have ${lengths} items, expected as many of each`);
    return result;
  }
  const seen = new Uint8Array(result.values.length);
  let notFinite = 0;
  for (let k = 0; k < rows.length; k++) {
    const row: unknown = rows[k];
    const column: unknown = columns[k];
    if (!isIndex(row, shape.rows)) {
      complaints.add([...path, "rows", k], `must be a whole number from 0 to ${shape.rows - 1}`);
      return result;
    }
    if (!isIndex(column, shape.columns)) {
      complaints.add([...path, "columns", k], `must be a whole number from 0 to ${shape.columns - 1}`);
      return result;
    }
    const at = row * shape.columns + column;
    if (seen[at]) {
      complaints.add([...path, "rows", k], `row ${row}, column ${column} is given twice`);
      return result;
    }
    seen[at] = 1;
    const read = readNumber(values[k], rule);
    if (read.wrong !== null) {
      complaints.add([...path, "values", k], read.wrong);
      return result;
    }
    result.values[at] = read.value;
    if (values[k] !== null && !Number.isFinite(read.value)) notFinite += 1;
  }
  return { values: result.values, notFinite };
}

function isIndex(value: unknown, below: number): value is number {
  return typeof value === "number" && Number.isInteger(value) && value >= 0 && value < below;
}
