import { createHash } from "node:crypto";
import type { Writer } from "../db/write.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import { allStill } from "../ingest/judgeMotion.ts";
import type { BlockMotion, JudgedMotions } from "../ingest/judgeMotion.ts";
import { packPlanes } from "../ingest/planes.ts";
import { hashKey } from "../ingest/tiles.ts";
import { unpackTiles } from "../ingest/tileSet.ts";
import { loadSnapshots, tilesOf } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import { idsByHash, storeTiles } from "../record/storeTiles.ts";
import type { Rebased } from "./baselines.ts";
import { BATCH_ENTRIES, batches } from "./batches.ts";
import { loadMotionTasks } from "./motionTasks.ts";
import type { ChangedBlock } from "./motionTasks.ts";

interface Pair {
  readonly blockId: number;
  readonly now: number;
  readonly before: number;
}

/**
 * Tells the motion of every block of a build against its baseline: null where the baseline has no such block, or
 * another shape of it. Blocks whose numbers are the same tiles as before are still without being read; the others are
 * judged in batches.
 */
export async function updateMotions(w: Writer, judge: JudgePool, rebased: Rebased): Promise<void> {
  const { buildId, baselineBuildId } = rebased;
  await w.run("UPDATE build_blocks SET motionId = NULL WHERE buildId = $1", [buildId]);
  if (baselineBuildId === null) return;
  const blocks = await loadPairs(w, buildId, baselineBuildId);
  const changed = blocks.filter(({ now, before }) => !sameNumbers(now, before));
  const told: [blockId: number, motionId: number][] = [];
  for (const batch of batches(changed, ({ now }) => now.rows * now.columns, BATCH_ENTRIES)) {
    const ids = await storeMotions(w, await judge.motions(await loadMotionTasks(w, buildId, batch)));
    told.push(...batch.map(({ blockId }, at) => [blockId, ids[at]] as [number, number]));
  }
  const stillByShape = new Map<number, number>();
  for (const { blockId, now, before } of blocks) {
    if (!sameNumbers(now, before)) continue;
    const entries = now.rows * now.columns;
    const motionId = stillByShape.get(entries) ?? (await storeMotions(w, allStill(entries)))[0];
    stillByShape.set(entries, motionId);
    told.push([blockId, motionId]);
  }
  await w.run(
    `UPDATE build_blocks SET motionId = t.motionId
     FROM (SELECT value ->> 0 AS blockId, value ->> 1 AS motionId FROM json_each($2)) t
     WHERE build_blocks.buildId = $1 AND build_blocks.blockId = t.blockId`,
    [buildId, JSON.stringify(told)],
  );
}

/** Blocks of both builds that have the same shape in both. */
async function loadPairs(w: Writer, buildId: number, baselineId: number): Promise<ChangedBlock[]> {
  const pairs = await w.select<Pair>(
    `SELECT n.blockId, n.snapshotId AS now, b.snapshotId AS before
     FROM build_blocks n JOIN build_blocks b ON b.blockId = n.blockId AND b.buildId = $2 WHERE n.buildId = $1`,
    [buildId, baselineId],
  );
  const snapshots = await loadSnapshots(
    w,
    pairs.flatMap((pair) => [pair.now, pair.before]),
  );
  return pairs
    .map(({ blockId, now, before }) => ({
      blockId,
      now: snapshots.get(now) as SnapshotPlanes,
      before: snapshots.get(before) as SnapshotPlanes,
    }))
    .filter(({ now, before }) => now.rows === before.rows && now.columns === before.columns);
}

/** What motion is told from is stored in the same tiles: nothing moved. */
function sameNumbers(now: SnapshotPlanes, before: SnapshotPlanes): boolean {
  if (now.id === before.id) return true;
  const same = (name: "derivative" | "reference" | "resolution" | "outputValues") =>
    tilesOf(now.planes, name).join() === tilesOf(before.planes, name).join();
  return (
    now.floor === before.floor && same("derivative") && same("reference") && same("resolution") && same("outputValues")
  );
}

/** Ids of the motions, in their order; equal ones are stored once. */
async function storeMotions(w: Writer, { motions, tiles }: JudgedMotions): Promise<number[]> {
  const tileHashes = unpackTiles(tiles).map((tile) => tile.hash);
  const digests = motions.map((motion) => digestOf(motion, tileHashes));
  const known = await idsByHash(w, "motions", digests);
  const fresh = motions.flatMap((motion, at) =>
    known.has(hashKey(digests[at])) ? [] : [{ motion, hash: digests[at] }],
  );
  if (fresh.length > 0) {
    const tileIds = await storeTiles(w, tiles);
    await w.insertOrIgnore(
      "motions",
      ["hash", "planes", "counts", "leftBehind"],
      fresh.map(({ motion, hash }) => {
        const plane = {
          name: "motion",
          reference: 0,
          step: 0,
          tiles: motion.plane.map((tile) => tileIds[tile]),
        } as const;
        return [hash, packPlanes([plane]), JSON.stringify(motion.counts), behindText(motion)];
      }),
    );
  }
  const ids = fresh.length === 0 ? known : await idsByHash(w, "motions", digests);
  return digests.map((digest) => ids.get(hashKey(digest)) as number);
}

function digestOf(motion: BlockMotion, tileHashes: readonly Buffer[]): Buffer {
  const hash = createHash("sha256");
  for (const tile of motion.plane) hash.update(tileHashes[tile]);
  return hash.update(behindText(motion) ?? "").digest();
}

function behindText({ leftBehind }: BlockMotion): string | null {
  return leftBehind && JSON.stringify(leftBehind);
}
