import type { Writer } from "../db/write.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import { allStill } from "../ingest/judgeMotion.ts";
import type { JudgedMotions } from "../ingest/judgeMotion.ts";
import { loadSnapshots, tilesOf } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import { nameTold, storeToldPlanes } from "../record/storeToldPlanes.ts";
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
  await nameTold(w, "motionId", buildId, told);
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

function storeMotions(w: Writer, { motions, tiles }: JudgedMotions): Promise<number[]> {
  const told = motions.map(({ counts, leftBehind, plane }) => {
    const behind = leftBehind && JSON.stringify(leftBehind);
    const planes = [{ name: "motion", reference: 0, step: 0, tiles: plane } as const];
    return { planes, beside: behind ?? "", columns: [JSON.stringify(counts), behind] };
  });
  return storeToldPlanes(w, "motions", ["counts", "leftBehind"], told, tiles);
}
