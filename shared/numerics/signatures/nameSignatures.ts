import { VERDICT_CODE } from "../../domain/vocabulary.ts";
import type { BlockNumbers, JudgedBlock } from "../types.ts";
import { without } from "./explain.ts";
import { byColumn, byRow } from "./groups.ts";
import { notFinite } from "./notFinite.ts";
import { countingOf } from "./place.ts";
import { named, simplest } from "./simplest.ts";
import type { Finding } from "./simplest.ts";
import type { BlockNames, Evidence, NamedSignature, Trial } from "./types.ts";

/** Signatures told of one block. */
const MOST_TOLD = 20;
/** More entries that neither the block nor its lines explain are not looked at one by one. */
const MOST_ENTRIES = 100;
/** Rows or columns looked at. */
const MOST_GROUPS = 4096;

/** What was found, and the entries that nothing explains yet. */
interface Round {
  readonly found: readonly Finding[];
  readonly rest: Int32Array;
}

/**
 * What kinds of mistake the entries of a block that disagree or are invalid look like (section 5 of the judging rules).
 *
 * The whole block is tried first, again as long as something explains at least 0.8 of what is left; then its rows or
 * its columns, whichever explains more, and so on with what they leave; then single entries, where few are left. Each
 * is told of the narrowest place that holds what it explains. A block without a bad entry has none; what nothing
 * explains has none either.
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
  const bad = countingOf(evidence, merged([disagreeing, notNumbers]));
  const told = nameAll(evidence, disagreeing)
    .sort((a, b) => b.match.explained.length - a.match.explained.length)
    .slice(0, MOST_TOLD)
    .map((finding) => ({ signature: named(finding, bad), entries: finding.match.explained.length }));
  const broken = notFinite(evidence, notNumbers, bad);
  if (broken !== null) told.push({ signature: broken, entries: notNumbers.length });
  const rank = ({ scope }: NamedSignature) => (scope === "block" ? 0 : 1);
  return told
    .sort((a, b) => rank(a.signature) - rank(b.signature) || b.entries - a.entries)
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

/** What is left by the whole block is tried line by line, what that leaves as a whole again, and at last one by one. */
function nameAll(evidence: Evidence, disagreeing: Int32Array): Finding[] {
  const found: Finding[] = [];
  let rest = disagreeing;
  for (let width: Trial["width"] = "block"; rest.length > 0; width = "line") {
    const whole = nameWhole(evidence, rest, width);
    const lines = nameLines(evidence, whole.rest);
    found.push(...whole.found, ...lines.found);
    rest = lines.rest;
    if (lines.found.length === 0 || found.length >= MOST_TOLD) break;
  }
  // Among very many that nothing explains, one or another looks like something.
  if (rest.length > MOST_ENTRIES) return found;
  const single = Array.from(rest, (k) => Int32Array.of(k));
  return [...found, ...nameGroups(evidence, rest, single, "entry of many").found];
}

/** By rows or by columns, whichever leaves less. */
function nameLines(evidence: Evidence, entries: Int32Array): Round {
  const rows = nameGroups(evidence, entries, byRow(evidence, entries, MOST_GROUPS), "line");
  const columns = nameGroups(evidence, entries, byColumn(evidence, entries, MOST_GROUPS), "line");
  return betterOf(rows, columns);
}

/** Fewer entries left, then fewer signatures. */
function betterOf(rows: Round, columns: Round): Round {
  const less = columns.rest.length - rows.rest.length || columns.found.length - rows.found.length;
  return less < 0 ? columns : rows;
}

/** What explains the entries, or nearly, and then what explains the rest of them. */
function nameWhole(evidence: Evidence, entries: Int32Array, width: Trial["width"]): Round {
  const found: Finding[] = [];
  let rest = entries;
  while (rest.length > 0) {
    const wide = found.length === 0 && rest.length > 1 ? width : "line";
    const finding = simplest({ evidence, entries: rest, width: wide });
    if (finding === null) break;
    found.push(finding);
    rest = without(rest, finding.match.settled);
  }
  return { found, rest };
}

function nameGroups(evidence: Evidence, all: Int32Array, groups: readonly Int32Array[], width: Trial["width"]): Round {
  const found: Finding[] = [];
  for (const entries of groups) {
    // A single line that holds all was tried as a whole.
    const finding = entries.length === all.length ? null : simplest({ evidence, entries, width });
    if (finding !== null) found.push(finding);
  }
  if (found.length === 0) return { found, rest: all };
  return { found, rest: without(all, merged(found.map(({ match }) => match.settled))) };
}
