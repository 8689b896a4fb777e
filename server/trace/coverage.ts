import { createHash } from "node:crypto";
import type { CommitGraph } from "../../shared/history/commitGraph.ts";
import type { Writer } from "../db/write.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import type { CoverageTask, JudgedCoverage } from "../ingest/judgeCoverage.ts";
import { packPlanes, unpackPlanes } from "../ingest/planes.ts";
import type { PlaneTiles } from "../ingest/planes.ts";
import { hashKey } from "../ingest/tiles.ts";
import { unpackTiles } from "../ingest/tileSet.ts";
import { storeSummary } from "../record/buildSummary.ts";
import type { LaneBuild } from "../record/laneBuilds.ts";
import { loadTiles, tilesOf } from "../record/readPlanes.ts";
import { idsByHash, storeTiles } from "../record/storeTiles.ts";
import type { Rebased } from "./baselines.ts";

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
  let changed = false;
  for (const block of blocks) {
    const coverage = block.before === null ? null : await judge.coverage(await taskOf(w, block, limit));
    const coverageId = coverage && (await storeCoverage(w, coverage));
    if (coverageId === block.coverageId) continue;
    await w.run("UPDATE build_blocks SET coverageId = $3 WHERE buildId = $1 AND blockId = $2", [
      buildId,
      block.blockId,
      coverageId,
    ]);
    changed = true;
  }
  if (changed) await storeSummary(w, buildId);
  return changed;
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

async function taskOf(w: Writer, block: PartlyChecked, limit: number): Promise<CoverageTask> {
  const now = unpackPlanes(block.planes);
  const motion = block.motion && unpackPlanes(block.motion);
  const carried = block.coverageBefore && unpackPlanes(block.coverageBefore);
  const before = carried ?? unpackPlanes(block.before as Buffer);
  const ids = {
    verdict: tilesOf(now, "verdict"),
    motion: motion && tilesOf(motion, "motion"),
    verdictBefore: tilesOf(before, "verdict"),
    ageBefore: carried && tilesOf(carried, "age"),
  };
  const tiles = await loadTiles(
    w,
    Object.values(ids).flatMap((list) => list ?? []),
  );
  const take = (list: readonly number[]) => list.map((id) => tiles.get(id) as CoverageTask["verdict"][number]);
  return {
    entries: block.entries,
    verdict: take(ids.verdict),
    motion: ids.motion && take(ids.motion),
    before: { verdict: take(ids.verdictBefore), age: ids.ageBefore && take(ids.ageBefore) },
    limit,
  };
}

async function storeCoverage(w: Writer, { counts, planes, tiles }: JudgedCoverage): Promise<number> {
  const hashes = unpackTiles(tiles).map((tile) => tile.hash);
  const digest = createHash("sha256");
  for (const tile of planes.flatMap((plane) => plane.tiles)) digest.update(hashes[tile]);
  const hash = digest.digest();
  const known = (await idsByHash(w, "coverages", [hash])).get(hashKey(hash));
  if (known !== undefined) return known;
  const ids = await storeTiles(w, tiles);
  const stored = planes.map((plane): PlaneTiles<number> => ({ ...plane, tiles: plane.tiles.map((tile) => ids[tile]) }));
  await w.insertOrIgnore(
    "coverages",
    ["hash", "planes", "counts"],
    [[hash, packPlanes(stored), JSON.stringify(counts)]],
  );
  return (await idsByHash(w, "coverages", [hash])).get(hashKey(hash)) as number;
}
