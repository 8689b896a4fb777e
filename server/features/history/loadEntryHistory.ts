import { MOTIONS, VERDICTS } from "../../../shared/domain/vocabulary.ts";
import { NEVER_CHECKED } from "../../../shared/numerics/coverage/carryVerdicts.ts";
import type { DriftPoint } from "../../../shared/numerics/drift/types.ts";
import type { HistoryItem } from "../../../shared/schemas/block.ts";
import type { Reader } from "../../db/reader.ts";
import { timeOrNull } from "../../http/present.ts";
import { loadCommitFacts } from "../../record/commitFacts.ts";
import { unpackEntries } from "../../record/entryList.ts";
import { entryValuesOf, presentEntryValues } from "../../record/entryValues.ts";
import { loadEntryCodes } from "./loadEntryCodes.ts";
import { loadEntrySeries } from "./loadEntrySeries.ts";
import type { EntryBuild, EntryPlace, EntrySeries } from "./loadEntrySeries.ts";

export interface EntryWanted extends EntryPlace {
  /** Only commits that this branch contains; null for all. */
  readonly branch: string | null;
  /** The newest so many. */
  readonly limit: number;
}

/** One entry over the builds of a lane, in commit order: its numbers, what moved, its drift and what happened to it. */
export async function loadEntryHistory(reader: Reader, wanted: EntryWanted): Promise<HistoryItem[]> {
  const series = await loadEntrySeries(reader, wanted);
  const builds = ofBranch(series, wanted.branch).slice(-wanted.limit);
  const codesOf = (name: "motion" | "verdict" | "age", idOf: (build: EntryBuild) => number | null) =>
    loadEntryCodes(
      reader,
      name,
      builds.map((build) => ({ id: idOf(build), entry: build.entry })),
    );
  const motions = await codesOf("motion", (build) => build.motionId);
  const verdicts = await codesOf("verdict", (build) => build.coverageId);
  const ages = await codesOf("age", (build) => build.coverageId);
  const events = await loadEvents(reader, wanted, builds);
  const commits = await loadCommitFacts(
    reader,
    wanted.projectId,
    builds.map((build) => build.sha),
  );
  return builds.map(({ sha, buildId, numbers }, at) => {
    const values = presentEntryValues(entryValuesOf(numbers, numbers.floor));
    const commit = commits.get(sha);
    const drift = series.drift.get(buildId) ?? null;
    return {
      commit: sha,
      buildId: String(buildId),
      subject: commit?.subject ?? null,
      author: commit?.author ?? null,
      committedAt: timeOrNull(commit?.committedAt ?? null),
      ...values,
      verdict: VERDICTS[verdicts[at] ?? NaN] ?? values.verdict,
      age: ageOf(ages[at], values.verdict),
      motion: MOTIONS[motions[at] ?? NaN] ?? null,
      drift: presentDrift(drift),
      event: events.get(sha) ?? eventOf(drift),
    };
  });
}

function ofBranch({ builds, project }: EntrySeries, branch: string | null): readonly EntryBuild[] {
  if (branch === null) return builds;
  const tip = project.tips.get(branch);
  if (tip === undefined) return [];
  const within = project.graph.ancestors(tip);
  return builds.filter((build) => within.has(build.sha));
}

/** Builds since the entry was checked: what earlier checks say, or this build itself. */
function ageOf(carried: number | null, own: HistoryItem["verdict"]): number | null {
  if (carried !== null) return carried === NEVER_CHECKED ? null : carried;
  return own === "unreferenced" ? null : 0;
}

function presentDrift(point: DriftPoint | null): HistoryItem["drift"] {
  if (point === null || point.decades === null) return null;
  const { decades, cusum, centre, spread } = point;
  return { decades, cusum, centre, spread };
}

/** That a climb ended is told by its drift, not as an event of its own. */
function eventOf(point: DriftPoint | null): HistoryItem["event"] {
  return point === null || point.event === "end" ? null : point.event;
}

async function loadEvents(
  reader: Reader,
  { laneId, blockId }: EntryPlace,
  builds: readonly EntryBuild[],
): Promise<Map<string, "break" | "repair">> {
  const rows = await reader.select<{ onset: string; repairedBy: string | null; columns: number; entries: Buffer }>(
    `SELECT b.onset, b.repairedBy, e.columnCount AS columns, e.entries
     FROM breaks b JOIN break_entries e ON e.breakId = b.id
     WHERE b.laneId = $1 AND e.blockId = $2 AND b.withdrawnAt IS NULL`,
    [laneId, blockId],
  );
  const entryOf = new Map(builds.map((build) => [build.columns, build.entry]));
  const events = new Map<string, "break" | "repair">();
  for (const { onset, repairedBy, columns, entries } of rows) {
    const entry = entryOf.get(columns);
    if (entry === undefined || !unpackEntries(entries).includes(entry)) continue;
    events.set(onset, "break");
    if (repairedBy !== null && !events.has(repairedBy)) events.set(repairedBy, "repair");
  }
  return events;
}
