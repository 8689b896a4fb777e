import { holds } from "./moved.ts";
import { slackOf } from "./slack.ts";
import type { Evidence } from "./types.ts";

/** The rows or the columns of a block: entry p of line l is l * lineStride + p * stride. */
export interface Lines {
  readonly count: number;
  readonly length: number;
  readonly lineStride: number;
  readonly stride: number;
}

export function rowsOf({ rows, columns }: Pick<Evidence, "rows" | "columns">): Lines {
  return { count: rows, length: columns, lineStride: columns, stride: 1 };
}

export function columnsOf({ rows, columns }: Pick<Evidence, "rows" | "columns">): Lines {
  return { count: columns, length: rows, lineStride: 1, stride: columns };
}

export function entryOf({ lineStride, stride }: Lines, line: number, p: number): number {
  return line * lineStride + p * stride;
}

export function lineOf(lines: Lines, k: number): number {
  return lines.stride === 1 ? Math.floor(k / lines.lineStride) : k % lines.count;
}

/** The lines that hold some of `entries`, ascending. */
export function linesWith(lines: Lines, entries: Int32Array): number[] {
  const touched = new Uint8Array(lines.count);
  for (const k of entries) touched[lineOf(lines, k)] = 1;
  const found: number[] = [];
  touched.forEach((is, line) => {
    if (is === 1) found.push(line);
  });
  return found;
}

/** One in so many entries of a line may miss: an uncertainty covers nearly always, not always. */
const ENTRIES_A_MISS = 20;

/** True where line `to` of the derivative holds line `from` of the reference. */
export function lineHolds(evidence: Evidence, lines: Lines, to: number, from: number): boolean {
  let left = Math.floor(lines.length / ENTRIES_A_MISS);
  for (let p = 0; p < lines.length; p += 1) {
    if (holds(evidence, entryOf(lines, to, p), entryOf(lines, from, p))) continue;
    if (left === 0) return false;
    left -= 1;
  }
  return true;
}

/** A number for each line by which alike lines are found: a fixed mixture of its entries. */
export interface LineKeys {
  readonly derivative: Float64Array;
  readonly reference: Float64Array;
  /** How far the keys of a derivative's line and of the reference's that it holds may be apart. */
  readonly tolerance: number;
}

/** Each position is weighed by how sharp its references are, so that one coarse position does not blur the keys. */
export function lineKeys(evidence: Evidence, lines: Lines, touched: readonly number[]): LineKeys {
  const weights = Float64Array.from({ length: lines.length }, (_, p) => {
    const weight = mixture(p) / coarsest(evidence, lines, touched, p);
    return weight < Infinity ? weight : 0;
  });
  const derivative = new Float64Array(touched.length);
  const reference = new Float64Array(touched.length);
  let tolerance = 0;
  touched.forEach((line, t) => {
    let spread = 0;
    for (let p = 0; p < lines.length; p += 1) {
      const weight = weights[p];
      if (weight === 0) continue;
      const k = entryOf(lines, line, p);
      derivative[t] = derivative[t] + weight * evidence.derivative[k];
      reference[t] = reference[t] + weight * evidence.reference[k];
      spread += weight * slackOf(evidence, k);
    }
    tolerance = Math.max(tolerance, spread);
  });
  return { derivative, reference, tolerance: tolerance * (1 + 1e-6) };
}

/** The largest slack of a position over the touched lines; infinite where an entry of it is not known. */
function coarsest(evidence: Evidence, lines: Lines, touched: readonly number[], p: number): number {
  let most = 0;
  for (const line of touched) {
    const k = entryOf(lines, line, p);
    const slack = slackOf(evidence, k);
    if (!(slack < Infinity) || evidence.derivative[k] - evidence.derivative[k] !== 0) return Infinity;
    if (slack > most) most = slack;
  }
  return most;
}

/** Weights between 1/2 and 3/2 without any pattern that entries could have too (the golden ratio's multiples). */
function mixture(p: number): number {
  return 0.5 + ((p * 0.618_033_988_749_895) % 1);
}
