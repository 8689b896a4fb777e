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

export function lineOf(lines: Lines, k: number): number {
  return lines.stride === 1 ? Math.floor(k / lines.lineStride) : k % lines.count;
}

/** The lines that hold some of `entries`, ascending. */
export function linesWith(lines: Lines, entries: Int32Array): number[] {
  const touched = new Uint8Array(lines.count);
  for (const k of entries) touched[lineOf(lines, k)] = 1;
  return Array.from(touched.keys()).filter((line) => touched[line] === 1);
}

/** One in so many entries of a line may miss: an uncertainty covers nearly always, not always. */
const ENTRIES_A_MISS = 20;

/** True where line `to` of the derivative holds line `from` of the reference. */
export function lineHolds(evidence: Evidence, lines: Lines, to: number, from: number): boolean {
  let left = Math.floor(lines.length / ENTRIES_A_MISS);
  for (let p = 0; p < lines.length; p += 1) {
    const k = to * lines.lineStride + p * lines.stride;
    if (holds(evidence, k, from * lines.lineStride + p * lines.stride)) continue;
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
  const derivative = new Float64Array(touched.length);
  const reference = new Float64Array(touched.length);
  const spread = new Float64Array(touched.length);
  for (let p = 0; p < lines.length; p += 1) {
    const at = (t: number) => touched[t] * lines.lineStride + p * lines.stride;
    let coarsest = 0;
    for (let t = 0; t < touched.length; t += 1) {
      const slack = slackOf(evidence, at(t));
      const known = slack < Infinity && evidence.derivative[at(t)] - evidence.derivative[at(t)] === 0;
      coarsest = known ? Math.max(coarsest, slack) : Infinity;
    }
    const weight = mixture(p) / coarsest;
    if (!(weight > 0) || !(weight < Infinity)) continue;
    for (let t = 0; t < touched.length; t += 1) {
      derivative[t] = derivative[t] + weight * evidence.derivative[at(t)];
      reference[t] = reference[t] + weight * evidence.reference[at(t)];
      spread[t] = spread[t] + weight * slackOf(evidence, at(t));
    }
  }
  return { derivative, reference, tolerance: spread.reduce((most, one) => Math.max(most, one), 0) * (1 + 1e-6) };
}

/** Weights between 1/2 and 3/2 without any pattern that entries could have too (the golden ratio's multiples). */
function mixture(p: number): number {
  return 0.5 + ((p * 0.618_033_988_749_895) % 1);
}
