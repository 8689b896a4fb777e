import type { Writer } from "../db/write.ts";
import { hashKey } from "../ingest/tiles.ts";
import { unpackTiles } from "../ingest/tileSet.ts";
import type { PackedTiles } from "../ingest/tileSet.ts";

const ROWS_PER_STATEMENT = 100;

/**
 * Stores the tiles that are not in the record yet and answers with the id of each, in the order of the pack.
 */
export async function storeTiles(w: Writer, packed: PackedTiles): Promise<Uint32Array> {
  const tiles = unpackTiles(packed);
  const hashes = tiles.map((tile) => tile.hash);
  const known = await idsByHash(w, "tiles", hashes);
  const fresh = tiles.filter((tile) => !known.has(hashKey(tile.hash)));
  await w.insertOrIgnore(
    "tiles",
    ["hash", "encoding", "data"],
    fresh.map((tile) => [tile.hash, tile.encoding, tile.data]),
    ROWS_PER_STATEMENT,
  );
  const added = await idsByHash(
    w,
    "tiles",
    fresh.map((tile) => tile.hash),
  );
  return Uint32Array.from(hashes, (hash) => (known.get(hashKey(hash)) ?? added.get(hashKey(hash))) as number);
}

/** Ids of the rows of a content-addressed table whose hash is one of those given, by `hashKey`. */
export async function idsByHash(
  w: Writer,
  table: "tiles" | "snapshots" | "motions" | "coverages" | "block_details",
  hashes: readonly Uint8Array[],
): Promise<Map<string, number>> {
  const ids = new Map<string, number>();
  for (let first = 0; first < hashes.length; first += HASHES_PER_QUERY) {
    const part = hashes.slice(first, first + HASHES_PER_QUERY);
    const rows = await w.select<{ id: number; hash: Buffer }>(
      `SELECT id, hash FROM ${table} WHERE hash IN (${part.map((_, at) => `$${at + 1}`).join(", ")})`,
      part.map((hash) => Buffer.from(hash)),
    );
    for (const { id, hash } of rows) ids.set(hashKey(hash), id);
  }
  return ids;
}

const HASHES_PER_QUERY = 500;
