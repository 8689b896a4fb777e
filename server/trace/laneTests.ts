import { VERDICT_CODE } from "../../shared/domain/vocabulary.ts";
import { groupBy } from "../../shared/domain/groupBy.ts";
import { partitionEntries } from "../../shared/history/partitionEntries.ts";
import type { Test } from "../../shared/history/types.ts";
import type { Reader } from "../db/reader.ts";
import type { LaneBuilds } from "../record/laneBuilds.ts";
import { loadSnapshots, loadSparsePlanes } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import { loadEverBad } from "./everBad.ts";
import type { EverBad } from "./everBad.ts";

/** Entries of one block with the same history of tests. */
export interface TestedEntries {
  readonly blockId: number;
  readonly columns: number;
  /** Flat indices, ascending. */
  readonly entries: Uint32Array;
  /** By sha: only commits that test the entries. */
  readonly tests: ReadonlyMap<string, Test>;
}

/**
 * What the builds of a lane say of every entry that was ever bad, as classes of equal history. Reads one verdict tile
 * for each *distinct* snapshot that holds such entries, however many builds share it.
 */
export async function loadLaneTests(
  reader: Reader,
  laneId: number,
  { speaking }: Pick<LaneBuilds, "speaking">,
): Promise<TestedEntries[]> {
  const everBad = await loadEverBad(reader, laneId);
  if (everBad.length === 0) return [];
  const shaOf = new Map([...speaking.values()].map((build) => [build.id, build.sha]));
  const rows = await reader.select<{ blockId: number; buildId: number; snapshotId: number }>(
    `SELECT blockId, buildId, snapshotId FROM build_blocks
     WHERE blockId IN (SELECT value FROM json_each($1)) AND buildId IN (SELECT value FROM json_each($2))`,
    [JSON.stringify(everBad.map((state) => state.blockId)), JSON.stringify([...shaOf.keys()])],
  );
  const snapshots = await loadSnapshots(
    reader,
    rows.map((row) => row.snapshotId),
  );
  const rowsOf = groupBy(rows, (row) => row.blockId);
  const classes: TestedEntries[] = [];
  for (const state of everBad) {
    const ofBlock = rowsOf.get(state.blockId) ?? [];
    const builds = ofBlock.filter((row) => snapshots.get(row.snapshotId)?.columns === state.columns);
    classes.push(...(await classesOf(reader, state, builds, snapshots, shaOf)));
  }
  return classes;
}

async function classesOf(
  reader: Reader,
  state: EverBad,
  builds: readonly { buildId: number; snapshotId: number }[],
  snapshots: ReadonlyMap<number, SnapshotPlanes>,
  shaOf: ReadonlyMap<number, string>,
): Promise<TestedEntries[]> {
  const distinct = [...new Set(builds.map((build) => build.snapshotId))];
  const verdicts = await gatherVerdicts(reader, state.entries, distinct, snapshots);
  const planeOf = new Map(distinct.map((id, at) => [id, at]));
  return partitionEntries(verdicts).map(({ entries, tests }) => {
    const bySha = new Map<string, Test>();
    for (const { buildId, snapshotId } of builds) {
      const test = tests[planeOf.get(snapshotId) as number];
      if (test !== null) bySha.set(shaOf.get(buildId) as string, test);
    }
    const { blockId, columns } = state;
    return { blockId, columns, entries: entries.map((at) => state.entries[at]), tests: bySha };
  });
}

/** A snapshot with fewer rows says nothing of the entries below. */
const NO_VERDICT = VERDICT_CODE.unreferenced;

async function gatherVerdicts(
  reader: Reader,
  everBad: Uint32Array,
  distinct: readonly number[],
  snapshots: ReadonlyMap<number, SnapshotPlanes>,
): Promise<Uint8Array[]> {
  const wanted = distinct.map((id) => {
    const snapshot = snapshots.get(id) as SnapshotPlanes;
    const size = snapshot.rows * snapshot.columns;
    return { snapshot, size, entries: everBad.filter((entry) => entry < size) };
  });
  const planes = await loadSparsePlanes(reader, wanted, ["verdict"]);
  return planes.map(({ verdict }, at) =>
    Uint8Array.from(everBad, (entry) => (entry < wanted[at].size ? verdict.at(entry) : NO_VERDICT)),
  );
}
