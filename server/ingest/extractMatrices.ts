import { randomUUID } from "node:crypto";

/** A dense matrix that was read straight from the bytes. */
export class ExtractedMatrix {
  readonly rows: number;
  readonly columns: number;
  /** rows x columns, row-major; finite numbers only. */
  readonly values: Float64Array;

  constructor(rows: number, columns: number, values: Float64Array) {
    this.rows = rows;
    this.columns = columns;
    this.values = values;
  }
}

export interface Extraction {
  /** The document with a mark in the place of each matrix. */
  readonly rest: Buffer;
  /** The matrix that a parsed value marks, or the value itself. */
  readonly restore: (parsed: unknown) => unknown;
}

const BEGIN = '"values":[[';
const OPEN = 0x5b;
const CLOSE = 0x5d;
const COMMA = 0x2c;

/**
 * Takes the dense matrices out of a document's bytes, row by row, so that neither the whole text nor all numbers are
 * ever held as JavaScript values: most of a large document is matrices. Null where a matrix is not plain rows of finite
 * numbers of one length, or has more than `mostNumbers`; the document is then parsed as a whole, and whatever is wrong
 * is told from there.
 *
 * `"values":[[` cannot stand inside of a JSON string, as its quotes would end the string. The marks hold a random word,
 * so that no document can bring its own.
 */
export function extractMatrices(bytes: Buffer, mostNumbers: number): Extraction | null {
  const word = `matrix ${randomUUID()}`;
  const matrices: ExtractedMatrix[] = [];
  const pieces: Buffer[] = [];
  let at = 0;
  let likelyEnd = 0;
  for (let begin = bytes.indexOf(BEGIN); begin >= 0; begin = bytes.indexOf(BEGIN, at)) {
    const start = begin + BEGIN.length - 2;
    // Where brackets close side by side the matrix ends; where they are set apart this lies too far on, which is mended.
    if (likelyEnd < start) likelyEnd = bytes.indexOf("]]", start);
    const read = likelyEnd < 0 ? null : readRows(bytes, start, likelyEnd, mostNumbers);
    if (read === null) return null;
    pieces.push(bytes.subarray(at, start), Buffer.from(`{"${word}":${matrices.length}}`));
    matrices.push(read.matrix);
    at = read.end;
  }
  pieces.push(bytes.subarray(at));
  const restore = (parsed: unknown): unknown => {
    if (typeof parsed !== "object" || parsed === null || !Object.hasOwn(parsed, word)) return parsed;
    return matrices[(parsed as Record<string, number>)[word]];
  };
  return { rest: Buffer.concat(pieces), restore };
}

/** Reads `[[...],[...]]` from its first bracket on. */
function readRows(
  bytes: Buffer,
  start: number,
  likelyEnd: number,
  mostNumbers: number,
): { matrix: ExtractedMatrix; end: number } | null {
  let values = new Float64Array(0);
  let rows = 0;
  let columns = 0;
  for (let at = start + 1; ;) {
    const close = bytes.indexOf(CLOSE, at);
    const row = close < 0 ? null : readRow(bytes, at, close + 1);
    if (row === null || (rows + 1) * row.length > mostNumbers) return null;
    if (rows === 0) {
      columns = row.length;
      values = new Float64Array(columns * rowsBetween(start, likelyEnd, close - at));
    } else if (row.length !== columns) return null;
    if ((rows + 1) * columns > values.length) values = enlarged(values, (rows + 1) * columns);
    for (let column = 0; column < columns; column++) {
      const value: unknown = row[column];
      if (typeof value !== "number" || !Number.isFinite(value)) return null;
      values[rows * columns + column] = value;
    }
    rows += 1;
    const next = skipSpace(bytes, close + 1);
    if (bytes[next] === CLOSE) {
      return { matrix: new ExtractedMatrix(rows, columns, trimmed(values, rows * columns)), end: next + 1 };
    }
    at = skipSpace(bytes, next + 1);
    if (bytes[next] !== COMMA || bytes[at] !== OPEN) return null;
  }
}

/** A little more rows than fit if all are about as long as the first. */
function rowsBetween(start: number, end: number, rowBytes: number): number {
  return Math.ceil((1.02 * (end - start)) / Math.max(1, rowBytes)) + 1;
}

function enlarged(values: Float64Array<ArrayBuffer>, needed: number): Float64Array<ArrayBuffer> {
  const larger = new Float64Array(Math.max(needed, Math.ceil(1.5 * values.length)));
  larger.set(values);
  return larger;
}

/** Numbers in a place of about their own size: memory beyond that was never written, but it counts against limits. */
function trimmed(values: Float64Array, count: number): Float64Array {
  return values.length <= 1.25 * count ? values.subarray(0, count) : values.slice(0, count);
}

function readRow(bytes: Buffer, start: number, end: number): unknown[] | null {
  try {
    const row: unknown = JSON.parse(bytes.toString("latin1", start, end));
    return Array.isArray(row) ? row : null;
  } catch {
    return null;
  }
}

function skipSpace(bytes: Buffer, from: number): number {
  let at = from;
  while (bytes[at] === 0x20 || bytes[at] === 0x0a || bytes[at] === 0x0d || bytes[at] === 0x09) at += 1;
  return at;
}
