import { MOTIONS, VERDICTS } from "../../../shared/domain/vocabulary.ts";
import { NEVER_CHECKED } from "../../../shared/numerics/coverage/carryVerdicts.ts";
import type { HistoryItem } from "../../../shared/schemas/block.ts";
import type { Reader } from "../../db/reader.ts";
import { timeOrNull } from "../../http/present.ts";
import { loadCommitFacts } from "../../record/commitFacts.ts";
import { commitColumns } from "../../record/commitColumns.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import { unpackEntries } from "../../record/entryList.ts";
import { entryValuesOf, presentEntryValues } from "../../record/entryValues.ts";
import { loadLaneBuilds } from "../../record/laneBuilds.ts";
import { loadEntryNumbers } from "../../record/readEntry.ts";
import { loadSnapshots } from "../../record/readPlanes.ts";
import type { SnapshotPlanes } from "../../record/readPlanes.ts";
import { loadEntryCodes } from "./loadEntryCodes.ts";

export interface EntryWanted {
  readonly projectId: number;
  readonly laneId: number;
  readonly blockId: number;
  readonly row: number;
  readonly column: number;
  /** Only commits that this branch contains; null for all. */
  readonly branch: string | null;
  /** The newest so many. */
  readonly limit: number;
}

interface BuildOfBlock {
  readonly buildId: number;
  readonly snapshotId: number;
  readonly motionId: number | null;
  readonly coverageId: number | null;
}

/**
 * One entry over the builds of a lane, in commit order. Reads one tile of each plane for each distinct snapshot that
 * holds the entry, however many builds share it.
 */
export async function loadEntryHistory(reader: Reader, wanted: EntryWanted): Promise<HistoryItem[]> {
  const { projectId, laneId, blockId, row, column } = wanted;
  const builds = await loadBuildsOfBlock(reader, wanted);
  const snapshots = await loadSnapshots(
    reader,
    builds.map((build) => build.snapshotId),
  );
  const holding = [...snapshots.values()].filter(({ rows, columns }) => row < rows && column < columns);
  const numbers = await loadNumbers(reader, holding, row, column);
  const codesOf = (name: "motion" | "verdict" | "age", idOf: (build: BuildOfBlock) => number | null) =>
    loadEntryCodes(
      reader,
      name,
      builds.map((build) => ({ id: idOf(build), entry: entryIn(snapshots, build, row, column) })),
    );
  const motions = await codesOf("motion", (build) => build.motionId);
  const verdicts = await codesOf("verdict", (build) => build.coverageId);
  const ages = await codesOf("age", (build) => build.coverageId);
  const events = await loadEvents(reader, laneId, blockId, snapshots, row, column);
  const commits = await loadCommitFacts(
    reader,
    projectId,
    builds.map((build) => build.sha),
  );
  return builds.flatMap(({ sha, buildId, snapshotId }, at) => {
    const values = numbers.get(snapshotId);
    if (values === undefined) return [];
    const commit = commits.get(sha);
    return [
      {
        commit: sha,
        buildId: String(buildId),
        subject: commit?.subject ?? null,
        author: commit?.author ?? null,
        committedAt: timeOrNull(commit?.committedAt ?? null),
        ...values,
        verdict: VERDICTS[verdicts[at] ?? NaN] ?? values.verdict,
        age: ageOf(ages[at], values.verdict),
        motion: MOTIONS[motions[at] ?? NaN] ?? null,
        drift: null,
        event: events.get(sha) ?? null,
      },
    ];
  });
}

function entryIn(
  snapshots: ReadonlyMap<number, SnapshotPlanes>,
  { snapshotId }: BuildOfBlock,
  row: number,
  column: number,
): number {
  return row * (snapshots.get(snapshotId)?.columns ?? 0) + column;
}

/** Builds since the entry was checked: what earlier checks say, or this build itself. */
function ageOf(carried: number | null, own: HistoryItem["verdict"]): number | null {
  if (carried !== null) return carried === NEVER_CHECKED ? null : carried;
  return own === "unreferenced" ? null : 0;
}

async function loadBuildsOfBlock(
  reader: Reader,
  wanted: EntryWanted,
): Promise<(BuildOfBlock & { readonly sha: string })[]> {
  const project = await loadGraph(reader, wanted.projectId);
  const { speaking } = await loadLaneBuilds(reader, wanted.laneId);
  const rows = await reader.select<BuildOfBlock>(
    "SELECT buildId, snapshotId, motionId, coverageId FROM build_blocks WHERE blockId = $1",
    [wanted.blockId],
  );
  const ofBuild = new Map(rows.map((row) => [row.buildId, row]));
  const tip = wanted.branch === null ? null : (project.tips.get(wanted.branch) ?? null);
  if (wanted.branch !== null && tip === null) return [];
  const within = tip === null ? null : project.graph.ancestors(tip);
  const builds = commitColumns(project).flatMap((sha) => {
    const build = speaking.get(sha);
    const row = build && ofBuild.get(build.id);
    return row && (within === null || within.has(sha)) ? [{ ...row, sha }] : [];
  });
  return builds.slice(-wanted.limit);
}

type Numbers = Pick<HistoryItem, "derivative" | "reference" | "uncertainty" | "error" | "verdict">;

async function loadNumbers(
  reader: Reader,
  snapshots: readonly SnapshotPlanes[],
  row: number,
  column: number,
): Promise<Map<number, Numbers>> {
  const places = snapshots.map(({ planes, columns }) => ({ planes, entry: row * columns + column }));
  const derivatives = await loadEntryNumbers(reader, "derivative", places);
  const references = await loadEntryNumbers(reader, "reference", places);
  const resolutions = await loadEntryNumbers(reader, "resolution", places);
  const verdicts = await loadEntryNumbers(reader, "verdict", places);
  return new Map(
    snapshots.map(({ id, floor }, at) => {
      const stored = {
        derivative: derivatives[at],
        reference: references[at],
        resolution: resolutions[at],
        verdict: verdicts[at],
      };
      return [id, presentEntryValues(entryValuesOf(stored, floor))];
    }),
  );
}

async function loadEvents(
  reader: Reader,
  laneId: number,
  blockId: number,
  snapshots: ReadonlyMap<number, SnapshotPlanes>,
  row: number,
  column: number,
): Promise<Map<string, "break" | "repair">> {
  const rows = await reader.select<{ onset: string; repairedBy: string | null; columns: number; entries: Buffer }>(
    `SELECT b.onset, b.repairedBy, e.columnCount AS columns, e.entries
     FROM breaks b JOIN break_entries e ON e.breakId = b.id
     WHERE b.laneId = $1 AND e.blockId = $2 AND b.withdrawnAt IS NULL`,
    [laneId, blockId],
  );
  const shapes = new Set([...snapshots.values()].map(({ columns }) => columns));
  const events = new Map<string, "break" | "repair">();
  for (const { onset, repairedBy, columns, entries } of rows) {
    if (!shapes.has(columns) || !unpackEntries(entries).includes(row * columns + column)) continue;
    events.set(onset, "break");
    if (repairedBy !== null && !events.has(repairedBy)) events.set(repairedBy, "repair");
  }
  return events;
}
