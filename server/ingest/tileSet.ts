import { encodePlane } from "./tiles.ts";
import type { EncodedTile } from "./tiles.ts";
import { PLANE_WIDTH } from "./planes.ts";
import type { PlaneName, PlaneTiles } from "./planes.ts";

/** The distinct tiles of one posting, and planes as indices into them. */
export class TileSet {
  readonly tiles: EncodedTile[] = [];
  private readonly indexByHash = new Map<string, number>();

  addPlane(name: PlaneName, values: ArrayBufferView, reference = 0, step = 0): PlaneTiles<number> {
    const bytes = new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
    const tiles = encodePlane(bytes, PLANE_WIDTH[name]).map((tile) => this.indexOf(tile));
    return { name, reference, step, tiles };
  }

  hashAt(index: number): Buffer {
    return this.tiles[index].hash;
  }

  private indexOf(tile: EncodedTile): number {
    const key = tile.hash.toString("latin1");
    const known = this.indexByHash.get(key);
    if (known !== undefined) return known;
    this.tiles.push(tile);
    this.indexByHash.set(key, this.tiles.length - 1);
    return this.tiles.length - 1;
  }

  /** All tiles in a few buffers that can be handed to another thread without copying. */
  pack(): PackedTiles {
    const bytes = this.tiles.reduce((sum, tile) => sum + tile.data.length, 0);
    const packed = {
      hashes: new Uint8Array(this.tiles.length * HASH_BYTES),
      encodings: new Uint8Array(this.tiles.length),
      ends: new Uint32Array(this.tiles.length),
      data: new Uint8Array(bytes),
    };
    let end = 0;
    this.tiles.forEach((tile, at) => {
      packed.hashes.set(tile.hash, at * HASH_BYTES);
      packed.encodings[at] = tile.encoding;
      packed.data.set(tile.data, end);
      end += tile.data.length;
      packed.ends[at] = end;
    });
    this.tiles.length = 0;
    return packed;
  }
}

const HASH_BYTES = 32;

export interface PackedTiles {
  readonly hashes: Uint8Array;
  readonly encodings: Uint8Array;
  /** End of each tile in `data`. */
  readonly ends: Uint32Array;
  readonly data: Uint8Array;
}

/** The tiles of a pack, as views. */
export function unpackTiles(packed: PackedTiles): EncodedTile[] {
  const { hashes, encodings, ends, data } = packed;
  return Array.from(encodings, (encoding, at) => ({
    encoding,
    hash: Buffer.from(hashes.buffer, hashes.byteOffset + at * HASH_BYTES, HASH_BYTES),
    data: Buffer.from(data.buffer, data.byteOffset + (ends[at - 1] ?? 0), ends[at] - (ends[at - 1] ?? 0)),
  }));
}

export function transferListOf(packed: PackedTiles): ArrayBuffer[] {
  return [packed.hashes, packed.encodings, packed.ends, packed.data].map((part) => part.buffer as ArrayBuffer);
}
