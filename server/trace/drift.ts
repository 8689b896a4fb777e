import type { BlockName } from "../../shared/domain/selector.ts";
import { groupBy } from "../../shared/domain/groupBy.ts";
import type { Writer } from "../db/write.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import type { ProjectGraph } from "../record/commitGraph.ts";
import type { LaneBuild, LaneBuilds } from "../record/laneBuilds.ts";
import { loadSnapshots } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import { chainChange, driftChain } from "./driftChain.ts";
import { newWalk } from "./driftWalk.ts";
import type { ChainItem, DriftWalk } from "./driftWalk.ts";
import { loadDriftParts, PART_ENTRIES, partKey } from "./driftParts.ts";
import type { DriftPart } from "./driftParts.ts";
import { loadRestarts, restartOf } from "./driftRestarts.ts";
import type { Restarts } from "./driftRestarts.ts";
import { followWalks } from "./followDrift.ts";

interface DriftLane {
  readonly projectId: number;
  readonly laneId: number;
}

/**
 * Follows drift along the lane's builds of the default branch. A build at the end goes on from the running state; one
 * that came in between, or an accepted baseline, has the drift of its blocks told anew from the planes of all builds.
 */
export async function updateDrift(
  w: Writer,
  judge: JudgePool,
  project: ProjectGraph,
  lane: DriftLane,
  builds: LaneBuilds,
): Promise<void> {
  const chain = driftChain(project, builds);
  const [{ driftChain: stored }] = await w.select<{ driftChain: Buffer | null }>(
    "SELECT driftChain FROM lanes WHERE id = $1",
    [lane.laneId],
  );
  const ids = chain.map((build) => build.id);
  const { appended, disturbed } = chainChange(unpackChain(stored), ids);
  if (appended.length + disturbed.length === 0) return;
  const restarts = await loadRestarts(w, lane.projectId, project, chain);
  for (const buildId of appended) await append(w, judge, lane, buildId, restarts);
  if (disturbed.length > 0) await retell(w, judge, lane, chain, restarts, await blocksOf(w, disturbed));
  await w.run("UPDATE lanes SET driftChain = $2 WHERE id = $1", [lane.laneId, packChain(ids)]);
}

/** Tells the drift of all blocks anew that a selector names: a baseline was accepted for them. */
export async function retellDrift(
  w: Writer,
  judge: JudgePool,
  project: ProjectGraph,
  lane: DriftLane,
  builds: LaneBuilds,
  covers: (block: BlockName, lane: string) => boolean,
): Promise<void> {
  const chain = driftChain(project, builds);
  const blocks = await blocksOf(
    w,
    chain.map((build) => build.id),
  );
  const restarts = await loadRestarts(w, lane.projectId, project, chain);
  const name = await laneName(w, lane.laneId);
  const chosen = blocks.filter((block) => covers(block, name));
  await retell(w, judge, lane, chain, restarts, chosen);
}

type NamedBlock = BlockName & { readonly blockId: number };

async function append(
  w: Writer,
  judge: JudgePool,
  { laneId }: DriftLane,
  buildId: number,
  restarts: Restarts,
): Promise<void> {
  const all = restarts.has(buildId) ? 1 : 0;
  const news = await w.select<{ blockId: number }>(
    `SELECT bb.blockId FROM build_blocks bb JOIN snapshots s ON s.id = bb.snapshotId
     WHERE bb.buildId = $1 AND ($3 OR NOT EXISTS (
       SELECT 1 FROM block_drifts d WHERE d.laneId = $2 AND d.blockId = bb.blockId AND d.columnCount = s.columnCount
     ) OR EXISTS (
       SELECT 1 FROM block_drifts d WHERE d.laneId = $2 AND d.blockId = bb.blockId AND d.columnCount = s.columnCount
         AND (d.lastSnapshotId <> bb.snapshotId OR d.quiet = 0)))`,
    [buildId, laneId, all],
  );
  const ids = news.map((row) => row.blockId);
  // The same numbers again, from which nothing can follow: they are only counted.
  await w.run(
    `UPDATE block_drifts SET repeats = repeats + 1 WHERE laneId = $2
       AND blockId NOT IN (SELECT value FROM json_each($3))
       AND EXISTS (SELECT 1 FROM build_blocks bb
         WHERE bb.buildId = $1 AND bb.blockId = block_drifts.blockId AND bb.snapshotId = block_drifts.lastSnapshotId)`,
    [buildId, laneId, JSON.stringify(ids)],
  );
  await followBlocks(w, judge, laneId, await namesOf(w, ids), [buildId], restarts);
}

/** From the first build of the chain on, as if nothing had been told before. */
async function retell(
  w: Writer,
  judge: JudgePool,
  { laneId }: DriftLane,
  chain: readonly LaneBuild[],
  restarts: Restarts,
  blocks: readonly NamedBlock[],
): Promise<void> {
  const ids = chain.map((build) => build.id);
  for (let first = 0; first < blocks.length; first += BLOCKS_AT_A_TIME) {
    const some = blocks.slice(first, first + BLOCKS_AT_A_TIME);
    for (const table of ["block_drifts", "drift_events"]) {
      await w.run(`DELETE FROM ${table} WHERE laneId = $1 AND blockId IN (SELECT value FROM json_each($2))`, [
        laneId,
        JSON.stringify(some.map((block) => block.blockId)),
      ]);
    }
    await followBlocks(w, judge, laneId, some, ids, restarts);
  }
}

/** A whole chain of many blocks would be much to hold. */
const BLOCKS_AT_A_TIME = 50;

/** Parts of blocks on their way through builds, with the snapshots that they meet. */
async function followBlocks(
  w: Writer,
  judge: JudgePool,
  laneId: number,
  blocks: readonly NamedBlock[],
  buildIds: readonly number[],
  restarts: Restarts,
): Promise<void> {
  const ids = blocks.map((block) => block.blockId);
  const rows = await w.select<{ blockId: number; buildId: number; snapshotId: number }>(
    `SELECT blockId, buildId, snapshotId FROM build_blocks
     WHERE blockId IN (SELECT value FROM json_each($1)) AND buildId IN (SELECT value FROM json_each($2))`,
    [JSON.stringify(ids), JSON.stringify(buildIds)],
  );
  const known = await loadDriftParts(w, laneId, ids);
  const snapshots = await loadSnapshots(w, [
    ...rows.map((row) => row.snapshotId),
    ...[...known.values()].map((part) => part.lastSnapshotId),
  ]);
  const rowsOf = groupBy(rows, (row) => row.blockId);
  const lane = await laneName(w, laneId);
  const walks = blocks.flatMap((block) => {
    const snapshotOf = new Map(rowsOf.get(block.blockId)?.map((row) => [row.buildId, row.snapshotId]));
    const items = buildIds.flatMap((buildId): ChainItem[] => {
      const snapshot = snapshots.get(snapshotOf.get(buildId) ?? NaN);
      return snapshot
        ? [{ buildId, snapshot, restart: restartOf(restarts, buildId, { ...block, lane }, snapshot) }]
        : [];
    });
    return walksOf({ laneId, blockId: block.blockId }, items, known, snapshots);
  });
  await followWalks(w, judge, walks, snapshots);
}

function walksOf(
  place: { readonly laneId: number; readonly blockId: number },
  items: readonly ChainItem[],
  known: ReadonlyMap<string, DriftPart>,
  snapshots: ReadonlyMap<number, SnapshotPlanes>,
): DriftWalk[] {
  return [...groupBy(items, ({ snapshot }) => snapshot.columns)].flatMap(([columns, ofShape]) => {
    const most = ofShape.reduce((size, { snapshot }) => Math.max(size, snapshot.rows * snapshot.columns), 0);
    return Array.from({ length: Math.ceil(most / PART_ENTRIES) }, (_, part) => {
      const placed = { ...place, columns, part };
      return newWalk(placed, known.get(partKey(placed)) ?? null, ofShape, snapshots);
    });
  });
}

async function blocksOf(w: Writer, buildIds: readonly number[]): Promise<NamedBlock[]> {
  const rows = await w.select<{ blockId: number }>(
    "SELECT DISTINCT blockId FROM build_blocks WHERE buildId IN (SELECT value FROM json_each($1))",
    [JSON.stringify(buildIds)],
  );
  return namesOf(
    w,
    rows.map((row) => row.blockId),
  );
}

function namesOf(w: Writer, blockIds: readonly number[]): Promise<NamedBlock[]> {
  return w.select<NamedBlock>(
    `SELECT id AS blockId, model, output, input, point, probe FROM blocks
     WHERE id IN (SELECT value FROM json_each($1)) ORDER BY id`,
    [JSON.stringify(blockIds)],
  );
}

async function laneName(w: Writer, laneId: number): Promise<string> {
  const [{ name }] = await w.select<{ name: string }>("SELECT name FROM lanes WHERE id = $1", [laneId]);
  return name;
}

function packChain(ids: readonly number[]): Buffer {
  return Buffer.from(Uint32Array.from(ids).buffer);
}

function unpackChain(packed: Buffer | null): number[] {
  return packed === null ? [] : [...new Uint32Array(new Uint8Array(packed).buffer)];
}
