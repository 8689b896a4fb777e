import { breakStateOn } from "../../shared/history/breakStateOn.ts";
import { groupBreaks } from "../../shared/history/groupBreaks.ts";
import { traceEntries } from "../../shared/history/traceEntries.ts";
import type { BreakGroup, TracedBreak, TracedEntries, Tests } from "../../shared/history/types.ts";
import type { ProjectGraph } from "../record/commitGraph.ts";
import type { TestedEntries } from "./laneTests.ts";

/** Entries of one block in a break. */
export interface BreakPart {
  readonly blockId: number;
  readonly columns: number;
  readonly entries: Uint32Array;
}

/** A break as the lane's builds tell it, before it is matched with what the record calls it. */
export interface LaneBreak extends Omit<BreakGroup, "blocks"> {
  readonly state: "open" | "repaired";
  readonly parts: readonly BreakPart[];
  /** Tests of its largest class of entries, for the next test and the suspects' scores. */
  readonly tests: Tests;
}

interface Told {
  readonly traced: TracedBreak;
  readonly open: boolean;
  readonly tests: Tests;
  readonly size: number;
}

/**
 * All breaks of a lane. Depends on the commits and the tests alone, never on the order in which they came.
 * A break's state speaks for the default branch once that contains the onset, before that for the branch it was found
 * on; where no branch was told, for whatever follows it.
 */
export function traceLane(project: ProjectGraph, classes: readonly TestedEntries[]): LaneBreak[] {
  const ranked: RankedBlock[] = [];
  const told = new Map<string, Told[]>();
  const items: TracedEntries[] = [];
  for (const { blockId, columns, entries, tests } of classes) {
    const key = rankOf(ranked, { blockId, columns });
    const followTo = followedTo(project, tests);
    for (const found of traceEntries(project.graph, tests)) {
      const line = stateOf(project, found, tests, followTo);
      items.push({ blockId: key, entries, traced: line.traced });
      const list = told.get(found.onset) ?? [];
      told.set(found.onset, list);
      list.push({ ...line, tests, size: entries.length });
    }
  }
  return groupBreaks(project.graph, items).map(({ blocks, ...group }) => {
    const members = (told.get(group.onset) as Told[]).filter(({ traced }) => sameSuspects(traced, group));
    const open = members.some((member) => member.open);
    return {
      ...group,
      state: open ? "open" : "repaired",
      repairedBy: open ? null : group.repairedBy,
      tests: members.reduce((a, b) => (b.size > a.size ? b : a)).tests,
      parts: blocks.map(({ blockId: rank, entries }) => ({ ...ranked[Number(rank)], entries })),
    };
  });
}

type RankedBlock = Omit<BreakPart, "entries">;

/** Name of a block that sorts as the classes were given (by block): ids would tell which one was posted first. */
function rankOf(ranked: RankedBlock[], block: RankedBlock): string {
  const last = ranked.at(-1);
  if (last?.blockId !== block.blockId || last.columns !== block.columns) ranked.push(block);
  return String(ranked.length - 1).padStart(9, "0");
}

/** Breaks of one class by onset, with their repairs looked for up to a tip; each tip is followed to once. */
function followedTo(project: ProjectGraph, tests: Tests): (tip: string) => ReadonlyMap<string, TracedBreak> {
  const byTip = new Map<string, ReadonlyMap<string, TracedBreak>>();
  return (tip) => {
    const known = byTip.get(tip);
    if (known) return known;
    const followed = new Map(traceEntries(project.graph, tests, { tip }).map((one) => [one.onset, one]));
    byTip.set(tip, followed);
    return followed;
  };
}

/** The break followed to the tip that its state speaks for. */
function stateOf(
  project: ProjectGraph,
  found: TracedBreak,
  tests: Tests,
  followTo: (tip: string) => ReadonlyMap<string, TracedBreak>,
): { readonly traced: TracedBreak; readonly open: boolean } {
  const tip = tipOf(project, found);
  if (tip === null) return { traced: found, open: found.repairedBy === null };
  const traced = followTo(tip).get(found.onset) ?? found;
  return { traced, open: breakStateOn(project.graph, traced, tests, tip) === "open" };
}

function tipOf({ graph, tips, mainline, defaultTip }: ProjectGraph, found: TracedBreak): string | null {
  if (mainline.has(found.onset)) return defaultTip;
  const containing = [...tips.values()].filter((tip) => graph.isAncestor(found.onset, tip));
  return containing.sort((a, b) => graph.placeOf(a) - graph.placeOf(b))[0] ?? null;
}

function sameSuspects(a: Pick<TracedBreak, "suspects">, b: Pick<TracedBreak, "suspects">): boolean {
  return a.suspects.length === b.suspects.length && a.suspects.every((sha, at) => sha === b.suspects[at]);
}
