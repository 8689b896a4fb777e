import { encodePlane, hashKey } from "./tiles.ts";
import type { EncodedTile } from "./tiles.ts";
import { PLANE_WIDTH } from "./planes.ts";
import type { PlaneName, PlaneTiles } from "./planes.ts";

const HASH_BYTES = 32;
const CHUNK_BYTES = 1 << 20;

/** The distinct tiles of one posting, and planes as indices into them. */
export class TileSet {
  private readonly indexByHash = new Map<string, number>();
  private readonly hashes: Buffer[] = [];
  private readonly encodings: number[] = [];
  private readonly places: { chunk: number; start: number; end: number }[] = [];
  private readonly chunks: Uint8Array[] = [];
  private readonly planeChunks = new Map<ArrayBufferLike, number>();
  /** The chunk that small data goes to, and the bytes taken of it. */
  private current = -1;
  private filled = CHUNK_BYTES;

  /**
   * Cuts a plane into tiles. Small planes are copied into chunks; a large one is kept as it is and handed over with
   * the tiles, so it must not be used after `pack`.
   */
  addPlane(name: PlaneName, values: ArrayBufferView, reference = 0, step = 0): PlaneTiles<number> {
    const bytes = new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
    const known = (hash: Buffer) => this.indexByHash.has(hashKey(hash));
    const tiles = encodePlane(bytes, PLANE_WIDTH[name], known).map((tile) => this.indexOf(tile));
    return { name, reference, step, tiles };
  }

  hashAt(index: number): Buffer {
    return this.hashes[index];
  }

  private indexOf(tile: EncodedTile): number {
    const key = hashKey(tile.hash);
    const known = this.indexByHash.get(key);
    if (known !== undefined) return known;
    const index = this.hashes.push(tile.hash) - 1;
    this.encodings.push(tile.encoding);
    this.places.push(this.keep(tile.data));
    this.indexByHash.set(key, index);
    return index;
  }

  private keep(data: Uint8Array): { chunk: number; start: number; end: number } {
    if (data.buffer.byteLength >= CHUNK_BYTES) return this.keepInPlace(data);
    if (this.filled + data.length > CHUNK_BYTES) {
      this.current = this.chunks.push(new Uint8Array(CHUNK_BYTES)) - 1;
      this.filled = 0;
    }
    const start = this.filled;
    this.chunks[this.current].set(data, start);
    this.filled += data.length;
    return { chunk: this.current, start, end: this.filled };
  }

  private keepInPlace(data: Uint8Array): { chunk: number; start: number; end: number } {
    let chunk = this.planeChunks.get(data.buffer);
    if (chunk === undefined) {
      chunk = this.chunks.push(new Uint8Array(data.buffer)) - 1;
      this.planeChunks.set(data.buffer, chunk);
    }
    return { chunk, start: data.byteOffset, end: data.byteOffset + data.length };
  }

  /** All tiles in a form that can be handed to another thread without copying. */
  pack(): PackedTiles {
    const hashes = new Uint8Array(this.hashes.length * HASH_BYTES);
    this.hashes.forEach((hash, at) => hashes.set(hash, at * HASH_BYTES));
    return {
      hashes,
      encodings: Uint8Array.from(this.encodings),
      places: Uint32Array.from(this.places.flatMap(({ chunk, start, end }) => [chunk, start, end])),
      chunks: this.chunks,
    };
  }
}

export interface PackedTiles {
  readonly hashes: Uint8Array;
  readonly encodings: Uint8Array;
  /** Chunk, start and end of each tile. */
  readonly places: Uint32Array;
  readonly chunks: readonly Uint8Array[];
}

/** The tiles of a pack, as views. */
export function unpackTiles(packed: PackedTiles): EncodedTile[] {
  const { hashes, encodings, places, chunks } = packed;
  return Array.from(encodings, (encoding, at) => {
    const [chunk, start, end] = places.subarray(at * 3, at * 3 + 3);
    const { buffer, byteOffset } = chunks[chunk];
    return {
      encoding,
      hash: Buffer.from(hashes.buffer, hashes.byteOffset + at * HASH_BYTES, HASH_BYTES),
      data: Buffer.from(buffer, byteOffset + start, end - start),
    };
  });
}

export function transferListOf(packed: PackedTiles): ArrayBuffer[] {
  const parts = [packed.hashes, packed.encodings, packed.places, ...packed.chunks];
  return parts.map((part) => part.buffer as ArrayBuffer);
}
