import { createHash } from "node:crypto";
import type { Bindable, Writer } from "../db/write.ts";
import { packPlanes } from "../ingest/planes.ts";
import type { PlaneTiles } from "../ingest/planes.ts";
import { hashKey } from "../ingest/tiles.ts";
import { unpackTiles } from "../ingest/tileSet.ts";
import type { PackedTiles } from "../ingest/tileSet.ts";
import { idsByHash, storeTiles } from "./storeTiles.ts";

/** Planes of a block that follow from several builds; their tiles are indices into a pack. */
export interface ToldPlanes {
  readonly planes: readonly PlaneTiles<number>[];
  /** What is told beside the planes and does not follow from them; part of what makes two of them the same. */
  readonly beside: string;
  /** Further columns of the row. */
  readonly columns: readonly Bindable[];
}

/** Ids of the rows, in the order of what was told; equal ones are stored once. `names`: of the further columns. */
export async function storeToldPlanes(
  w: Writer,
  table: "motions" | "coverages",
  names: readonly string[],
  told: readonly ToldPlanes[],
  tiles: PackedTiles,
): Promise<number[]> {
  const tileHashes = unpackTiles(tiles).map((tile) => tile.hash);
  const hashes = told.map((one) => digestOf(one, tileHashes));
  const known = await idsByHash(w, table, hashes);
  const fresh = told.flatMap((one, at) => (known.has(hashKey(hashes[at])) ? [] : [{ one, hash: hashes[at] }]));
  if (fresh.length > 0) {
    const tileIds = await storeTiles(w, tiles);
    await w.insertOrIgnore(
      table,
      ["hash", "planes", ...names],
      fresh.map(({ one, hash }) => {
        const planes = one.planes.map((plane) => ({ ...plane, tiles: plane.tiles.map((tile) => tileIds[tile]) }));
        return [hash, packPlanes(planes), ...one.columns];
      }),
    );
  }
  const ids = fresh.length === 0 ? known : await idsByHash(w, table, hashes);
  return hashes.map((hash) => ids.get(hashKey(hash)) as number);
}

function digestOf({ planes, beside }: ToldPlanes, tileHashes: readonly Buffer[]): Buffer {
  const hash = createHash("sha256");
  for (const tile of planes.flatMap((plane) => plane.tiles)) hash.update(tileHashes[tile]);
  return hash.update(beside).digest();
}

/** Names in the rows of a build, by block, what was told of them. */
export async function nameTold(
  w: Writer,
  column: "motionId" | "coverageId",
  buildId: number,
  told: readonly (readonly [blockId: number, id: number | null])[],
): Promise<void> {
  if (told.length === 0) return;
  await w.run(
    `UPDATE build_blocks SET ${column} = t.told
     FROM (SELECT value ->> 0 AS blockId, value ->> 1 AS told FROM json_each($2)) t
     WHERE build_blocks.buildId = $1 AND build_blocks.blockId = t.blockId`,
    [buildId, JSON.stringify(told)],
  );
}
