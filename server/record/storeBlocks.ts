import { blockKey, jacobianKey } from "../../shared/domain/selector.ts";
import type { BlockName } from "../../shared/domain/selector.ts";
import type { Bindable, Writer } from "../db/write.ts";
import type { JudgedPostedBlock } from "../ingest/judgePosting.ts";
import { packPlanes } from "../ingest/planes.ts";
import { hashKey } from "../ingest/tiles.ts";
import type { PackedTiles } from "../ingest/tileSet.ts";
import { RecordConflict } from "./conflict.ts";
import { idsByHash, storeTiles } from "./storeTiles.ts";

/**
 * Stores the judged blocks of a posting under its build: what the record holds already (tiles, snapshots, details) is
 * named again, so that a build that changes nothing adds one small row for each block.
 * @throws RecordConflict when a block of the build came in another shard already.
 */
export async function storeBlocks(
  w: Writer,
  projectId: number,
  buildId: number,
  blocks: readonly JudgedPostedBlock[],
  packed: PackedTiles,
): Promise<void> {
  const blockIds = await ensureBlocks(w, projectId, blocks);
  await refuseTwins(w, buildId, blockIds, blocks);
  const snapshotIds = await storeSnapshots(w, blocks, packed);
  const detailsIds = await storeDetails(w, blocks);
  await w.insertOrIgnore(
    "build_blocks",
    ["buildId", "blockId", "snapshotId", "detailsId", "costs"],
    blocks.map((block, at): Bindable[] => [
      buildId,
      blockIds[at],
      snapshotIds.get(hashKey(block.snapshot.hash)) as number,
      detailsIds.get(hashKey(block.detailsHash)) as number,
      block.costs,
    ]),
    500,
  );
}

async function ensureBlocks(w: Writer, projectId: number, blocks: readonly JudgedPostedBlock[]): Promise<number[]> {
  const known = await loadBlockIds(w, projectId, blocks);
  const fresh = blocks.filter((block) => !known.has(blockKey(block)));
  await w.insertOrIgnore(
    "blocks",
    ["projectId", "model", "point", "output", "input", "probe"],
    fresh.map((block): Bindable[] => [projectId, block.model, block.point, block.output, block.input, block.probe]),
    500,
  );
  const added = fresh.length === 0 ? known : await loadBlockIds(w, projectId, fresh);
  return blocks.map((block) => (known.get(blockKey(block)) ?? added.get(blockKey(block))) as number);
}

/** Ids by name of all blocks of the models that the given ones are of. */
async function loadBlockIds(w: Writer, projectId: number, blocks: readonly BlockName[]): Promise<Map<string, number>> {
  const rows = await w.select<BlockName & { id: number }>(
    `SELECT id, model, point, output, input, probe FROM blocks
     WHERE projectId = $1 AND model IN (SELECT value FROM json_each($2))`,
    [projectId, JSON.stringify([...new Set(blocks.map((block) => block.model))])],
  );
  return new Map(rows.map((row) => [blockKey(row), row.id]));
}

async function refuseTwins(
  w: Writer,
  buildId: number,
  blockIds: readonly number[],
  blocks: readonly JudgedPostedBlock[],
): Promise<void> {
  const [twin] = await w.select<{ blockId: number }>(
    "SELECT blockId FROM build_blocks WHERE buildId = $1 AND blockId IN (SELECT value FROM json_each($2)) LIMIT 1",
    [buildId, JSON.stringify(blockIds)],
  );
  if (twin === undefined) return;
  const at = blockIds.indexOf(twin.blockId);
  const { model, output, input, point, probe } = blocks[at];
  const name = `${probe === "" ? "" : `probe ${probe} of `}${model}, ${output} by ${input} at ${point}`;
  // Where a block came with probes it is in the list more than once: its place in the document is that of its names.
  const place = [...new Set(blocks.map(jacobianKey))].indexOf(jacobianKey(blocks[at]));
  throw new RecordConflict("invalid", `${name} came with another shard of this build already`, `#/blocks/${place}`);
}

async function storeSnapshots(
  w: Writer,
  blocks: readonly JudgedPostedBlock[],
  packed: PackedTiles,
): Promise<Map<string, number>> {
  const hashes = blocks.map((block) => block.snapshot.hash);
  const known = await idsByHash(w, "snapshots", hashes);
  const fresh = blocks.map((block) => block.snapshot).filter((snapshot) => !known.has(hashKey(snapshot.hash)));
  if (fresh.length === 0) return known;
  const tileIds = await storeTiles(w, packed);
  await w.insertOrIgnore(
    "snapshots",
    ["hash", "rowCount", "columnCount", "planes", "rtol", "floor", ...COUNTS, "worst", "resolutions"],
    fresh.map((snapshot): Bindable[] => [
      Buffer.from(snapshot.hash),
      snapshot.rows,
      snapshot.columns,
      packPlanes(snapshot.planes.map((plane) => ({ ...plane, tiles: plane.tiles.map((tile) => tileIds[tile]) }))),
      snapshot.rtol,
      snapshot.floor,
      ...COUNTS.map((name) => snapshot.counts[name]),
      snapshot.worst && JSON.stringify(snapshot.worst),
      JSON.stringify(snapshot.resolutions),
    ]),
  );
  return idsByHash(w, "snapshots", hashes);
}

const COUNTS = ["agrees", "disagrees", "unresolved", "unreferenced", "invalid"] as const;

async function storeDetails(w: Writer, blocks: readonly JudgedPostedBlock[]): Promise<Map<string, number>> {
  const hashes = blocks.map((block) => block.detailsHash);
  const known = await idsByHash(w, "block_details", hashes);
  const fresh = blocks.filter((block) => !known.has(hashKey(block.detailsHash)));
  await w.insertOrIgnore(
    "block_details",
    ["hash", "details"],
    fresh.map((block): Bindable[] => [Buffer.from(block.detailsHash), block.details]),
  );
  return fresh.length === 0 ? known : idsByHash(w, "block_details", hashes);
}
