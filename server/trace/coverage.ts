import type { CommitGraph } from "../../shared/history/commitGraph.ts";
import type { Writer } from "../db/write.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import type { StoredTile } from "../ingest/assemble.ts";
import type { CoverageTask, JudgedCoverages } from "../ingest/judgeCoverage.ts";
import { unpackPlanes } from "../ingest/planes.ts";
import { storeSummary } from "../record/buildSummary.ts";
import type { LaneBuild } from "../record/laneBuilds.ts";
import { loadTiles, tilesOf } from "../record/readPlanes.ts";
import { nameTold, storeToldPlanes } from "../record/storeToldPlanes.ts";
import type { Rebased } from "./baselines.ts";
import { BATCH_ENTRIES, batches } from "./batches.ts";

/** A block that its build did not check as a whole, with what the build before says of it. */
interface PartlyChecked {
  readonly blockId: number;
  readonly entries: number;
  readonly coverageId: number | null;
  readonly planes: Buffer;
  readonly motion: Buffer | null;
  /** Null where the build before has no such block, or another shape of it. */
  readonly before: Buffer | null;
  readonly coverageBefore: Buffer | null;
}

/**
 * Tells anew what builds say of the entries that they did not check themselves: `rebased` builds (new, or compared
 * with another build than before), and every build that follows one whose telling changed. Builds are gone
 * through in commit order, so that the record does not depend on the order of arrival.
 */
export async function updateCoverages(
  w: Writer,
  judge: JudgePool,
  graph: CommitGraph,
  builds: readonly LaneBuild[],
  rebased: readonly Rebased[],
  limit: number,
): Promise<void> {
  if (rebased.length === 0) return;
  const told = new Map(rebased.map((one) => [one.buildId, one.baselineBuildId]));
  const changed = new Set<number>();
  const inOrder = [...builds].sort((a, b) => graph.placeOf(a.sha) - graph.placeOf(b.sha) || a.id - b.id);
  for (const { id, baselineBuildId } of inOrder) {
    const baseline = told.has(id) ? (told.get(id) ?? null) : baselineBuildId;
    if (!told.has(id) && (baseline === null || !changed.has(baseline))) continue;
    if (await updateBuild(w, judge, id, baseline, limit)) changed.add(id);
  }
}

/** True where anything changed. */
async function updateBuild(
  w: Writer,
  judge: JudgePool,
  buildId: number,
  baselineId: number | null,
  limit: number,
): Promise<boolean> {
  const blocks = await loadPartlyChecked(w, buildId, baselineId);
  const told = new Map<number, number | null>(blocks.map(({ blockId }) => [blockId, null]));
  const followed = blocks.filter(({ before }) => before !== null);
  for (const batch of batches(followed, ({ entries }) => entries, BATCH_ENTRIES)) {
    const ids = await storeCoverages(w, await judge.coverages(await loadTasks(w, batch, limit)));
    batch.forEach(({ blockId }, at) => told.set(blockId, ids[at]));
  }
  const changed = blocks.filter(({ blockId, coverageId }) => told.get(blockId) !== coverageId);
  if (changed.length === 0) return false;
  await nameTold(
    w,
    "coverageId",
    buildId,
    changed.map(({ blockId }) => [blockId, told.get(blockId) ?? null] as const),
  );
  await storeSummary(w, buildId);
  return true;
}

function loadPartlyChecked(w: Writer, buildId: number, baselineId: number | null): Promise<PartlyChecked[]> {
  return w.select<PartlyChecked>(
    `SELECT n.blockId, s.rowCount * s.columnCount AS entries, n.coverageId, s.planes, m.planes AS motion,
       p.planes AS before, v.planes AS coverageBefore
     FROM build_blocks n JOIN snapshots s ON s.id = n.snapshotId LEFT JOIN motions m ON m.id = n.motionId
     LEFT JOIN build_blocks b ON b.blockId = n.blockId AND b.buildId = $2
     LEFT JOIN snapshots p ON p.id = b.snapshotId AND p.rowCount = s.rowCount AND p.columnCount = s.columnCount
     LEFT JOIN coverages v ON v.id = b.coverageId
     WHERE n.buildId = $1 AND s.unreferenced > 0`,
    [buildId, baselineId],
  );
}

async function loadTasks(w: Writer, blocks: readonly PartlyChecked[], limit: number): Promise<CoverageTask[]> {
  const wanted = blocks.map((block) => {
    const carried = block.coverageBefore && unpackPlanes(block.coverageBefore);
    const before = carried ?? unpackPlanes(block.before as Buffer);
    return {
      entries: block.entries,
      verdict: tilesOf(unpackPlanes(block.planes), "verdict"),
      motion: block.motion && tilesOf(unpackPlanes(block.motion), "motion"),
      verdictBefore: tilesOf(before, "verdict"),
      ageBefore: carried && tilesOf(carried, "age"),
    };
  });
  const tiles = await loadTiles(
    w,
    wanted.flatMap(({ verdict, motion, verdictBefore, ageBefore }) => [
      ...verdict,
      ...(motion ?? []),
      ...verdictBefore,
      ...(ageBefore ?? []),
    ]),
  );
  const take = (list: readonly number[]) => list.map((id) => tiles.get(id) as StoredTile);
  return wanted.map(({ entries, verdict, motion, verdictBefore, ageBefore }) => ({
    entries,
    verdict: take(verdict),
    motion: motion && take(motion),
    before: { verdict: take(verdictBefore), age: ageBefore && take(ageBefore) },
    limit,
  }));
}

/** Ids in the order of the coverages, null where there is none. */
async function storeCoverages(w: Writer, { coverages, tiles }: JudgedCoverages): Promise<(number | null)[]> {
  const told = coverages.flatMap((coverage) =>
    coverage === null ? [] : [{ planes: coverage.planes, beside: "", columns: [JSON.stringify(coverage.counts)] }],
  );
  const ids = (await storeToldPlanes(w, "coverages", ["counts"], told, tiles)).values();
  return coverages.map((coverage) => (coverage === null ? null : (ids.next().value ?? null)));
}
