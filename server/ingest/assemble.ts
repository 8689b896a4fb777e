import { PLANE_WIDTH } from "./planes.ts";
import type { PlaneName } from "./planes.ts";
import { decodeTile } from "./tiles.ts";

/** A tile as it stands in the record. */
export interface StoredTile {
  readonly encoding: number;
  readonly data: Uint8Array;
}

/** Puts a plane together from its tiles. */
export function assemble(name: PlaneName, tiles: readonly StoredTile[], length: number): ArrayBuffer {
  const width = PLANE_WIDTH[name];
  const bytes = new Uint8Array(length * width);
  let at = 0;
  for (const tile of tiles) {
    const part = decodeTile(tile.encoding, tile.data, width);
    bytes.set(part, at);
    at += part.length;
  }
  if (at !== bytes.length) throw new RangeError(`${name}: ${at} bytes in its tiles, expected ${bytes.length}`);
  return bytes.buffer;
}
