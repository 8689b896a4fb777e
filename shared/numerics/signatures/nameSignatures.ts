import { VERDICT_CODE } from "../../domain/vocabulary.ts";
import type { BlockNumbers, JudgedBlock } from "../types.ts";
import { without } from "./explain.ts";
import { byColumn, byRow } from "./groups.ts";
import { notFinite } from "./notFinite.ts";
import { named, simplest } from "./simplest.ts";
import type { BlockNames, Evidence, NamedSignature, Trial } from "./types.ts";

/** Signatures told of one block. */
const MOST_TOLD = 20;
/** Single entries looked at, once neither the block nor its lines explain them. */
const MOST_ENTRIES = 100;
/** Rows or columns looked at. */
const MOST_GROUPS = 4096;

interface Told {
  readonly signature: NamedSignature;
  readonly entries: number;
}
interface Round {
  readonly told: readonly Told[];
  readonly rest: Int32Array;
}

/**
 * What kinds of mistake the entries of a block that disagree or are invalid look like (section 5 of the judging rules).
 *
 * The whole block is tried first, again as long as something explains at least 0.8 of what is left; then its rows or
 * its columns, whichever explains more; then single entries. Each is told of the narrowest place that holds what it
 * explains. A block without a bad entry has none; what nothing explains has none either.
 *
 * Shapes: as in `judgeBlock`. Units: factors are dimensionless. Throws: never on a judged block.
 * NaN policy: entries that are not finite are told as such; entries without a reference say nothing.
 * Accuracy: see `scripts/bench/faults.ts`. At most 20 are returned, block first, then those of most entries.
 * Cost: candidates are given up on a sample; those that hold go over the bad entries once.
 * Source: section 5 of the judging rules; J. Rissanen, Modeling by shortest data description, Automatica 14:465-471,
 * 1978 (the simplest explanation is the one with the fewest numbers to tell).
 */
export function nameSignatures(block: BlockNumbers, judged: JudgedBlock, names: BlockNames): NamedSignature[] {
  const { disagrees, invalid } = judged.counts;
  if (disagrees + invalid === 0) return [];
  const evidence: Evidence = {
    rows: block.rows,
    columns: block.columns,
    derivative: block.derivative,
    reference: judged.best.value,
    resolution: judged.resolution,
    floor: judged.floor,
    rtol: judged.tolerances.rtol,
    names,
  };
  const disagreeing = entriesWith(judged.verdict, VERDICT_CODE.disagrees, disagrees);
  const notNumbers = entriesWith(judged.verdict, VERDICT_CODE.invalid, invalid);
  const bad = merged([disagreeing, notNumbers]);
  const told = nameAll(evidence, disagreeing, bad);
  const broken = notFinite(evidence, notNumbers, bad);
  if (broken !== null) told.push({ signature: broken, entries: notNumbers.length });
  return told
    .sort(firstToTell)
    .slice(0, MOST_TOLD)
    .map(({ signature }) => signature);
}

function entriesWith(verdict: Uint8Array, code: number, count: number): Int32Array {
  const entries = new Int32Array(count);
  let found = 0;
  for (let k = 0; found < count; k += 1) if (verdict[k] === code) entries[found++] = k;
  return entries;
}

/** All of them, ascending. */
function merged(parts: readonly Int32Array[]): Int32Array {
  const filled = parts.filter((part) => part.length > 0);
  if (filled.length === 1) return filled[0];
  const all = new Int32Array(filled.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of filled) {
    all.set(part, at);
    at += part.length;
  }
  return all.sort();
}

function firstToTell(a: Told, b: Told): number {
  const rank = ({ signature }: Told) => (signature.scope === "block" ? 0 : 1);
  return rank(a) - rank(b) || b.entries - a.entries;
}

function nameAll(evidence: Evidence, disagreeing: Int32Array, bad: Int32Array): Told[] {
  const whole = nameWhole(evidence, disagreeing, bad);
  const rows = nameGroups(evidence, whole.rest, byRow(evidence, whole.rest, MOST_GROUPS), bad);
  const columns = nameGroups(evidence, whole.rest, byColumn(evidence, whole.rest, MOST_GROUPS), bad);
  const lines = betterOf(rows, columns);
  const single = Array.from(lines.rest.subarray(0, MOST_ENTRIES), (k) => Int32Array.of(k));
  const entries = nameGroups(evidence, lines.rest, single, bad, "entry of many");
  return [...whole.told, ...lines.told, ...entries.told];
}

/** Fewer entries left, then fewer signatures. */
function betterOf(rows: Round, columns: Round): Round {
  const less = columns.rest.length - rows.rest.length || columns.told.length - rows.told.length;
  return less < 0 ? columns : rows;
}

/** What explains the block, or nearly, and then what explains the rest of it. */
function nameWhole(evidence: Evidence, disagreeing: Int32Array, bad: Int32Array): Round {
  const told: Told[] = [];
  let rest = disagreeing;
  while (rest.length > 0) {
    const trial: Trial = { evidence, entries: rest, width: rest.length === 1 ? "line" : "block" };
    const finding = simplest(trial);
    if (finding === null) break;
    told.push({ signature: named(trial, finding, bad), entries: finding.match.explained.length });
    rest = without(rest, finding.match.settled);
  }
  return { told, rest };
}

function nameGroups(
  evidence: Evidence,
  all: Int32Array,
  groups: readonly Int32Array[],
  bad: Int32Array,
  width: Trial["width"] = "line",
): Round {
  const told: Told[] = [];
  const settled: Int32Array[] = [];
  for (const entries of groups) {
    const trial: Trial = { evidence, entries, width };
    const finding = simplest(trial);
    if (finding === null) continue;
    told.push({ signature: named(trial, finding, bad), entries: finding.match.explained.length });
    settled.push(finding.match.settled);
  }
  return { told, rest: settled.length === 0 ? all : without(all, merged(settled)) };
}
