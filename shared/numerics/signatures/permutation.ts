import { entryOf, lineHolds, lineKeys } from "./lines.ts";
import type { Lines } from "./lines.ts";
import { matchUp } from "./matchUp.ts";
import { holds } from "./moved.ts";
import type { Evidence } from "./types.ts";

/** Alike lines that are told apart by comparing them whole: a line is given up after so many. */
const MOST_ALIKE = 12;
/** Lines compared in all, for each line: a block of equal lines is no puzzle worth a minute. */
const COMPARISONS_A_LINE = 40;
/** More lines are only looked at for a reversal or a shift. */
const MOST_LINES = 150_000;
/** Lines that are looked for before all are, and how many of them may be nowhere. */
const PROBED = 6;
const MOST_LOST = 1;

/** Which line of the reference each touched line of the derivative holds. */
export interface Permutation {
  /** Touched lines, ascending. */
  readonly to: readonly number[];
  /** For each of them the line that it holds, -1 where none was found. */
  readonly from: readonly number[];
  readonly kind: "swap" | "reversal" | "shift" | "other";
  /** Of a shift: by how many places. */
  readonly by: number;
}

/**
 * The permutation of the touched lines that makes the derivative's hold the reference's, or null. A swap, a reversal
 * and a cyclic shift (of all lines, or of the touched ones) are preferred where equal lines leave a choice.
 * Cost: a few lines are looked for first. Then lines are sorted by a mixture of their entries, and only those with like
 * mixtures are compared whole.
 */
export function findPermutation(evidence: Evidence, lines: Lines, touched: readonly number[]): Permutation | null {
  if (touched.length < 2 || areLost(evidence, lines, touched)) return null;
  const alike = touched.length > MOST_LINES ? null : alikeLines(evidence, lines, touched);
  const partners = alike === null ? partnersOf(evidence, lines, touched, touched[0]) : alike[0];
  const all = Array.from({ length: lines.count }, (_, line) => line);
  for (const among of touched.length === lines.count ? [all] : [all, touched]) {
    const structured = reversal(evidence, lines, among) ?? shift(evidence, lines, among, touched[0], partners);
    if (structured !== null) return structured;
  }
  if (alike === null) return null;
  const index = new Map(touched.map((line, t) => [line, t]));
  const from = matchUp(alike.map((options) => options.map((line) => index.get(line) ?? -1)));
  return from === null ? null : { to: touched, from: from.map((t) => touched[t] ?? -1), kind: "other", by: 0 };
}

/** True where lines of the derivative have an entry that no line of the reference has in that place. */
function areLost(evidence: Evidence, lines: Lines, touched: readonly number[]): boolean {
  const middle = Math.floor(lines.length / 2);
  let lost = 0;
  for (let s = 0; s < PROBED; s += 1) {
    const line = touched[Math.floor(((s + 0.5) * touched.length) / PROBED)];
    const found = touched.some((other) => holds(evidence, entryOf(lines, line, middle), entryOf(lines, other, middle)));
    lost += Number(!found);
    if (lost > MOST_LOST) return true;
  }
  return false;
}

/** Touched lines of the reference that a line of the derivative holds; it itself is none of them. */
function partnersOf(evidence: Evidence, lines: Lines, touched: readonly number[], line: number): number[] {
  const partners: number[] = [];
  for (const other of touched) {
    if (other !== line && lineHolds(evidence, lines, line, other)) partners.push(other);
    if (partners.length === MOST_ALIKE) break;
  }
  return partners;
}

/** For each touched line the touched lines of the reference that it holds; null where it is too much work. */
function alikeLines(evidence: Evidence, lines: Lines, touched: readonly number[]): number[][] | null {
  const keys = lineKeys(evidence, lines, touched);
  const order = touched.map((_, t) => t).sort((s, t) => keys.reference[s] - keys.reference[t]);
  const sorted = Float64Array.from(order, (t) => keys.reference[t]);
  let comparisons = COMPARISONS_A_LINE * touched.length;
  const alike: number[][] = [];
  for (let t = 0; t < touched.length; t += 1) {
    const key = keys.derivative[t];
    const options: number[] = [];
    let at = firstFrom(sorted, key - keys.tolerance);
    for (; at < sorted.length && sorted[at] <= key + keys.tolerance && options.length < MOST_ALIKE; at += 1) {
      if (comparisons === 0) return null;
      comparisons -= 1;
      const from = touched[order[at]];
      if (from !== touched[t] && lineHolds(evidence, lines, touched[t], from)) options.push(from);
    }
    alike.push(options);
  }
  return alike;
}

function firstFrom(sorted: Float64Array, least: number): number {
  let low = 0;
  let high = sorted.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle] < least) low = middle + 1;
    else high = middle;
  }
  return low;
}

function reversal(evidence: Evidence, lines: Lines, among: readonly number[]): Permutation | null {
  const last = among.length - 1;
  const from = among.map((_, t) => among[last - t]);
  const fits = among.every((line, t) => lineHolds(evidence, lines, line, from[t]));
  return fits ? { to: among, from, kind: among.length === 2 ? "swap" : "reversal", by: 0 } : null;
}

function shift(
  evidence: Evidence,
  lines: Lines,
  among: readonly number[],
  first: number,
  partners: readonly number[],
): Permutation | null {
  const size = among.length;
  const start = among.indexOf(first);
  for (const line of partners) {
    const by = (start - among.indexOf(line) + size) % size;
    const source = (t: number) => among[(t - by + size) % size];
    if (!among.every((to, t) => lineHolds(evidence, lines, to, source(t)))) continue;
    return { to: among, from: among.map((_, t) => source(t)), kind: "shift", by };
  }
  return null;
}
