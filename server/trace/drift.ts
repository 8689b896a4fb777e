import type { BlockName } from "../../shared/domain/selector.ts";
import { groupBy } from "../../shared/domain/groupBy.ts";
import type { Writer } from "../db/write.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import type { ProjectGraph } from "../record/commitGraph.ts";
import type { LaneBuild, LaneBuilds } from "../record/laneBuilds.ts";
import { loadSnapshots } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import { chainChange, driftChain } from "./driftChain.ts";
import { loadDriftParts, PART_ENTRIES } from "./driftParts.ts";
import { loadRestarts, restartOf } from "./driftRestarts.ts";
import type { Restarts } from "./driftRestarts.ts";
import { followPart } from "./followDrift.ts";
import type { ChainItem } from "./followDrift.ts";

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
  const told = JSON.stringify(news.map((row) => row.blockId));
  // The same numbers again, from which nothing can follow: they are only counted.
  await w.run(
    `UPDATE block_drifts SET repeats = repeats + 1 WHERE laneId = $2
       AND blockId NOT IN (SELECT value FROM json_each($3))
       AND EXISTS (SELECT 1 FROM build_blocks bb
         WHERE bb.buildId = $1 AND bb.blockId = block_drifts.blockId AND bb.snapshotId = block_drifts.lastSnapshotId)`,
    [buildId, laneId, told],
  );
  const lane = await laneName(w, laneId);
  for (const block of await namesOf(
    w,
    news.map((row) => row.blockId),
  )) {
    await followBlock(w, judge, laneId, { ...block, lane }, [buildId], restarts);
  }
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
  const lane = await laneName(w, laneId);
  for (const block of blocks) {
    for (const table of ["block_drifts", "drift_events"]) {
      await w.run(`DELETE FROM ${table} WHERE laneId = $1 AND blockId = $2`, [laneId, block.blockId]);
    }
    await followBlock(w, judge, laneId, { ...block, lane }, ids, restarts);
  }
}

async function followBlock(
  w: Writer,
  judge: JudgePool,
  laneId: number,
  block: NamedBlock & { readonly lane: string },
  buildIds: readonly number[],
  restarts: Restarts,
): Promise<void> {
  const rows = await w.select<{ buildId: number; snapshotId: number }>(
    "SELECT buildId, snapshotId FROM build_blocks WHERE blockId = $1 AND buildId IN (SELECT value FROM json_each($2))",
    [block.blockId, JSON.stringify(buildIds)],
  );
  const snapshotOf = new Map(rows.map((row) => [row.buildId, row.snapshotId]));
  const snapshots = await loadSnapshots(w, snapshotOf.values());
  const items = buildIds.flatMap((buildId): ChainItem[] => {
    const snapshot = snapshots.get(snapshotOf.get(buildId) ?? NaN);
    return snapshot ? [{ buildId, snapshot, restart: restartOf(restarts, buildId, block, snapshot) }] : [];
  });
  for (const [columns, ofShape] of groupBy(items, ({ snapshot }) => snapshot.columns)) {
    await followShape(w, judge, { laneId, blockId: block.blockId, columns }, ofShape);
  }
}

async function followShape(
  w: Writer,
  judge: JudgePool,
  key: { readonly laneId: number; readonly blockId: number; readonly columns: number },
  items: readonly ChainItem[],
): Promise<void> {
  const known = await loadDriftParts(w, key);
  const before = await loadSnapshots(
    w,
    [...known.values()].map((part) => part.lastSnapshotId),
  );
  const snapshots = new Map<number, SnapshotPlanes>([
    ...before,
    ...items.map(({ snapshot }) => [snapshot.id, snapshot] as const),
  ]);
  const most = items.reduce((size, { snapshot }) => Math.max(size, snapshot.rows * snapshot.columns), 0);
  for (let part = 0; part * PART_ENTRIES < most; part += 1) {
    await followPart(w, judge, key, part, known.get(part) ?? null, items, snapshots);
  }
}

function blocksOf(w: Writer, buildIds: readonly number[]): Promise<NamedBlock[]> {
  return w.select<NamedBlock>(
    `SELECT id AS blockId, model, output, input, point, probe FROM blocks
     WHERE id IN (SELECT blockId FROM build_blocks WHERE buildId IN (SELECT value FROM json_each($1))) ORDER BY id`,
    [JSON.stringify(buildIds)],
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
