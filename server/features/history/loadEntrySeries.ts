import type { BlockName } from "../../../shared/domain/selector.ts";
import type { DriftItem, DriftPoint } from "../../../shared/numerics/drift/types.ts";
import type { Reader } from "../../db/reader.ts";
import { commitColumns } from "../../record/commitColumns.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import type { ProjectGraph } from "../../record/commitGraph.ts";
import { loadLaneBuilds } from "../../record/laneBuilds.ts";
import type { LaneBuilds } from "../../record/laneBuilds.ts";
import { loadEntryNumbers } from "../../record/readEntry.ts";
import { loadSnapshots } from "../../record/readPlanes.ts";
import type { SnapshotPlanes } from "../../record/readPlanes.ts";
import { driftChain } from "../../trace/driftChain.ts";
import { loadRestarts } from "../../trace/driftRestarts.ts";
import { entryDrift } from "./entryDrift.ts";

export interface EntryPlace {
  readonly projectId: number;
  readonly laneId: number;
  readonly blockId: number;
  readonly row: number;
  readonly column: number;
}

/** A build that holds the entry. */
export interface EntryBuild {
  readonly buildId: number;
  readonly sha: string;
  readonly motionId: number | null;
  readonly coverageId: number | null;
  /** Columns of the block in this build. */
  readonly columns: number;
  /** Flat index of the entry in this build. */
  readonly entry: number;
  readonly numbers: DriftItem;
}

export interface EntrySeries {
  /** In commit order. */
  readonly builds: readonly EntryBuild[];
  /** By build; only builds of the default branch that tell something have a drift. */
  readonly drift: ReadonlyMap<number, DriftPoint>;
  readonly project: ProjectGraph;
}

/**
 * The numbers of one entry in all builds of a lane and its drift along them. Reads one tile of each plane for each
 * distinct snapshot that holds the entry, however many builds share it.
 */
export async function loadEntrySeries(reader: Reader, place: EntryPlace): Promise<EntrySeries> {
  const project = await loadGraph(reader, place.projectId);
  const lane = await loadLaneBuilds(reader, place.laneId);
  const builds = await loadEntryBuilds(reader, place, project, lane);
  return { builds, drift: await loadDrift(reader, place, project, lane, builds), project };
}

async function loadEntryBuilds(
  reader: Reader,
  place: EntryPlace,
  project: ProjectGraph,
  { speaking }: LaneBuilds,
): Promise<EntryBuild[]> {
  const rows = await reader.select<Pick<EntryBuild, "buildId" | "motionId" | "coverageId"> & { snapshotId: number }>(
    "SELECT buildId, snapshotId, motionId, coverageId FROM build_blocks WHERE blockId = $1",
    [place.blockId],
  );
  const ofBuild = new Map(rows.map((row) => [row.buildId, row]));
  const inOrder = commitColumns(project).flatMap((sha) => {
    const row = ofBuild.get(speaking.get(sha)?.id ?? NaN);
    return row ? [{ ...row, sha }] : [];
  });
  const snapshots = await loadSnapshots(
    reader,
    inOrder.map((build) => build.snapshotId),
  );
  const holding = [...snapshots.values()].filter(({ rows: m, columns: n }) => place.row < m && place.column < n);
  const numbers = await loadNumbers(reader, holding, place);
  return inOrder.flatMap(({ snapshotId, ...build }) => {
    const { columns } = snapshots.get(snapshotId) as SnapshotPlanes;
    const stored = numbers.get(snapshotId);
    return stored ? [{ ...build, columns, entry: place.row * columns + place.column, numbers: stored }] : [];
  });
}

/** By snapshot. */
async function loadNumbers(
  reader: Reader,
  snapshots: readonly SnapshotPlanes[],
  { row, column }: EntryPlace,
): Promise<Map<number, DriftItem>> {
  const places = snapshots.map(({ planes, columns }) => ({ planes, entry: row * columns + column }));
  const derivatives = await loadEntryNumbers(reader, "derivative", places);
  const references = await loadEntryNumbers(reader, "reference", places);
  const resolutions = await loadEntryNumbers(reader, "resolution", places);
  const verdicts = await loadEntryNumbers(reader, "verdict", places);
  return new Map(
    snapshots.map(({ id, floor }, at) => [
      id,
      {
        derivative: derivatives[at],
        reference: references[at],
        resolution: resolutions[at],
        verdict: verdicts[at],
        floor,
      },
    ]),
  );
}

async function loadDrift(
  reader: Reader,
  place: EntryPlace,
  project: ProjectGraph,
  lane: LaneBuilds,
  builds: readonly EntryBuild[],
): Promise<Map<number, DriftPoint>> {
  const chain = driftChain(project, lane);
  const ofBuild = new Map(builds.map((build) => [build.buildId, build]));
  const restarts = await loadRestarts(reader, place.projectId, project, chain);
  const [block] = await reader.select<BlockName & { lane: string }>(
    `SELECT b.*, l.name AS lane FROM blocks b JOIN lanes l ON l.id = $2 WHERE b.id = $1`,
    [place.blockId, place.laneId],
  );
  const ofChain = chain.flatMap((build) => ofBuild.get(build.id) ?? []);
  return entryDrift(ofChain, block, place.row, place.column, restarts);
}
