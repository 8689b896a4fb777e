import { createHash } from "node:crypto";
import { groupBy } from "../../shared/domain/groupBy.ts";
import type { Writer } from "../db/write.ts";
import type { BlockDetails } from "../ingest/blockDetails.ts";
import type { StoredTile } from "../ingest/assemble.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import type { JudgedMotion, MotionTask, StoredSide } from "../ingest/judgeMotion.ts";
import { packPlanes } from "../ingest/planes.ts";
import { hashKey } from "../ingest/tiles.ts";
import { TileSet, unpackTiles } from "../ingest/tileSet.ts";
import { loadSnapshots, loadTiles, tilesOf } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import { idsByHash, storeTiles } from "../record/storeTiles.ts";
import type { Rebased } from "./baselines.ts";

interface Pair {
  readonly blockId: number;
  readonly now: number;
  readonly before: number;
}

/**
 * Tells the motion of every block of a build against its baseline, block by block: null where the baseline has no such
 * block, or another shape of it. Blocks whose numbers are the same tiles as before are still without being read.
 */
export async function updateMotions(w: Writer, judge: JudgePool, rebased: Rebased): Promise<void> {
  const { buildId, baselineBuildId } = rebased;
  await w.run("UPDATE build_blocks SET motionId = NULL WHERE buildId = $1", [buildId]);
  if (baselineBuildId === null) return;
  const pairs = await w.select<Pair>(
    `SELECT n.blockId, n.snapshotId AS now, b.snapshotId AS before
     FROM build_blocks n JOIN build_blocks b ON b.blockId = n.blockId AND b.buildId = $2 WHERE n.buildId = $1`,
    [buildId, baselineBuildId],
  );
  const snapshots = await loadSnapshots(
    w,
    pairs.flatMap((pair) => [pair.now, pair.before]),
  );
  const told: { readonly motionId: number; readonly blockId: number }[] = [];
  const stillByShape = new Map<number, number>();
  for (const pair of pairs) {
    const now = snapshots.get(pair.now) as SnapshotPlanes;
    const before = snapshots.get(pair.before) as SnapshotPlanes;
    if (now.rows !== before.rows || now.columns !== before.columns) continue;
    const entries = now.rows * now.columns;
    const still = sameNumbers(now, before);
    const motionId =
      (still ? stillByShape.get(entries) : undefined) ??
      (await storeMotion(
        w,
        still ? allStill(entries) : await judgeChange(w, judge, { buildId, blockId: pair.blockId }, now, before),
      ));
    if (still) stillByShape.set(entries, motionId);
    told.push({ motionId, blockId: pair.blockId });
  }
  for (const [motionId, blocks] of groupBy(told, (one) => one.motionId)) {
    await w.run(
      `UPDATE build_blocks SET motionId = $1
       WHERE buildId = $2 AND blockId IN (SELECT value FROM json_each($3))`,
      [motionId, buildId, JSON.stringify(blocks.map((one) => one.blockId))],
    );
  }
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

function allStill(entries: number): JudgedMotion {
  const tiles = new TileSet();
  const plane = tiles.addPlane("motion", new Uint8Array(entries)).tiles;
  const counts = { still: entries, together: 0, "derivative-only": 0, "model-only": 0, apart: 0 };
  return { counts, plane, leftBehind: null, tiles: tiles.pack() };
}

async function judgeChange(
  w: Writer,
  judge: JudgePool,
  place: { readonly buildId: number; readonly blockId: number },
  now: SnapshotPlanes,
  before: SnapshotPlanes,
): Promise<JudgedMotion> {
  const names = ["derivative", "reference", "resolution", "verdict", "outputValues"] as const;
  const ids = [now, before].flatMap((side) => names.flatMap((name) => tilesOf(side.planes, name)));
  const tiles = await loadTiles(w, ids);
  const plane = (side: SnapshotPlanes, name: (typeof names)[number]) =>
    tilesOf(side.planes, name).map((id) => tiles.get(id) as StoredTile);
  const sideOf = (side: SnapshotPlanes): StoredSide => ({
    floor: side.floor,
    derivative: plane(side, "derivative"),
    reference: plane(side, "reference"),
    resolution: plane(side, "resolution"),
    outputValues: side.planes.some((p) => p.name === "outputValues") ? plane(side, "outputValues") : null,
  });
  return judge.motion({
    rows: now.rows,
    columns: now.columns,
    now: { ...sideOf(now), verdict: plane(now, "verdict") },
    before: sideOf(before),
    ...(await loadNames(w, place)),
  });
}

/** What the block's rows and columns are called, and the tolerance that it was judged with. */
async function loadNames(
  w: Writer,
  { buildId, blockId }: { readonly buildId: number; readonly blockId: number },
): Promise<Pick<MotionTask, "rtol" | "names">> {
  const [block] = await w.select<{ rtol: number; output: string; input: string; details: string }>(
    `SELECT s.rtol, b.output, b.input, d.details FROM build_blocks bb JOIN blocks b ON b.id = bb.blockId
     JOIN snapshots s ON s.id = bb.snapshotId JOIN block_details d ON d.id = bb.detailsId
     WHERE bb.buildId = $1 AND bb.blockId = $2`,
    [buildId, blockId],
  );
  const details = JSON.parse(block.details) as BlockDetails;
  return {
    rtol: block.rtol,
    names: {
      output: { name: block.output, ...details.output },
      input: { name: block.input, ...details.input },
    },
  };
}

async function storeMotion(w: Writer, motion: JudgedMotion): Promise<number> {
  const tileHashes = unpackTiles(motion.tiles).map((tile) => tile.hash);
  const hash = createHash("sha256");
  for (const tile of motion.plane) hash.update(tileHashes[tile]);
  const leftBehind = motion.leftBehind && JSON.stringify(motion.leftBehind);
  if (leftBehind !== null) hash.update(leftBehind);
  const digest = hash.digest();
  const known = (await idsByHash(w, "motions", [digest])).get(hashKey(digest));
  if (known !== undefined) return known;
  const tileIds = await storeTiles(w, motion.tiles);
  const plane = { name: "motion", reference: 0, step: 0, tiles: motion.plane.map((tile) => tileIds[tile]) } as const;
  await w.insertOrIgnore(
    "motions",
    ["hash", "planes", "counts", "leftBehind"],
    [[digest, packPlanes([plane]), JSON.stringify(motion.counts), leftBehind]],
  );
  return (await idsByHash(w, "motions", [digest])).get(hashKey(digest)) as number;
}
