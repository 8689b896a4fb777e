import type { CommitGraph } from "./commitGraph.ts";
import type { BreakGroup, TracedBreak, TracedEntries } from "./types.ts";

/**
 * Entries of one lane, of whatever block, with the same onset and the same suspects become one break. Breaks come in
 * topological order of their onsets, then by number of suspects and their shas; blocks by id.
 *
 * Of a group's members `bad` is the union; `lastGood` the newest; `repairedBy` is null while one is open, else the
 * newest (only there all entries agree again); `fixedBetween` that of the first member, by block, that has one.
 * @throws RangeError for an onset that is not in the graph.
 */
export function groupBreaks(graph: CommitGraph, items: Iterable<TracedEntries>): BreakGroup[] {
  const byOnset = new Map<string, TracedEntries[][]>();
  for (const item of [...items].sort(byBlockThenEntry)) {
    const groups = byOnset.get(item.traced.onset) ?? [];
    byOnset.set(item.traced.onset, groups);
    const group = groups.find((members) => sameList(members[0]!.traced.suspects, item.traced.suspects));
    if (group) group.push(item);
    else groups.push([item]);
  }
  return [...byOnset.values()]
    .flat()
    .map((members) => merged(graph, members))
    .sort((a, b) => graph.placeOf(a.onset) - graph.placeOf(b.onset) || compareLists(a.suspects, b.suspects));
}

function merged(graph: CommitGraph, members: readonly TracedEntries[]): BreakGroup {
  const traced = members.map((member) => member.traced);
  const parts = new Map<string, Uint32Array[]>();
  for (const { blockId, entries } of members) parts.set(blockId, [...(parts.get(blockId) ?? []), entries]);
  const blocks = [...parts].map(([blockId, lists]) => ({ blockId, entries: ascending(lists) }));
  const repairs = traced.map((one) => one.repairedBy);
  return {
    ...told(traced),
    lastGood: newest(
      graph,
      traced.map((one) => one.lastGood),
    ),
    repairedBy: repairs.includes(null) ? null : newest(graph, repairs),
    bad: inOrder(graph, traced),
    blocks,
    entryCount: blocks.reduce((sum, block) => sum + block.entries.length, 0),
  };
}

/** What all members share, or the first member that has it tells. */
function told(
  traced: readonly TracedBreak[],
): Pick<TracedBreak, "onset" | "suspects" | "kind" | "fixedBetween" | "historyIncomplete"> {
  const first = traced.find((one) => one.fixedBetween !== null) ?? traced[0]!;
  const { onset, suspects, kind, fixedBetween, historyIncomplete } = first;
  return { onset, suspects, kind, fixedBetween, historyIncomplete };
}

function newest(graph: CommitGraph, shas: readonly (string | null)[]): string | null {
  const places = shas.filter((sha) => sha !== null).map((sha) => graph.placeOf(sha));
  return places.length === 0 ? null : graph.shaAt(Math.max(...places));
}

function inOrder(graph: CommitGraph, traced: readonly TracedBreak[]): readonly string[] {
  if (traced.every((one) => sameList(one.bad, traced[0]!.bad))) return traced[0]!.bad;
  const shas = new Set(traced.flatMap((one) => one.bad));
  return [...shas].sort((a, b) => graph.placeOf(a) - graph.placeOf(b));
}

function ascending(parts: readonly Uint32Array[]): Uint32Array {
  const all = new Uint32Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    all.set(part, at);
    at += part.length;
  }
  return all.sort();
}

function byBlockThenEntry(a: TracedEntries, b: TracedEntries): number {
  if (a.blockId !== b.blockId) return a.blockId < b.blockId ? -1 : 1;
  return (a.entries[0] ?? -1) - (b.entries[0] ?? -1);
}

function sameList(a: readonly string[], b: readonly string[]): boolean {
  return a === b || (a.length === b.length && a.every((item, at) => item === b[at]));
}

function compareLists(a: readonly string[], b: readonly string[]): number {
  if (a.length !== b.length) return a.length - b.length;
  const at = a.findIndex((item, index) => item !== b[index]);
  return at < 0 ? 0 : a[at]! < b[at]! ? -1 : 1;
}
