import { TILE_ENTRIES } from "../../shared/domain/limits.ts";
import type { Reader } from "../db/reader.ts";
import { assemble } from "../ingest/assemble.ts";
import type { StoredTile } from "../ingest/assemble.ts";
import { PLANE_WIDTH, unpackPlanes } from "../ingest/planes.ts";
import type { PlaneName, PlaneTiles } from "../ingest/planes.ts";
import { decodeTile } from "../ingest/tiles.ts";

/** A stored snapshot without its numbers. */
export interface SnapshotPlanes {
  readonly id: number;
  readonly rows: number;
  readonly columns: number;
  readonly floor: number;
  readonly planes: readonly PlaneTiles<number>[];
}

/** Ids are bound as one JSON text: SQLite limits the number of bound values. */
export async function loadSnapshots(reader: Reader, ids: Iterable<number>): Promise<Map<number, SnapshotPlanes>> {
  const rows = await reader.select<{
    id: number;
    rowCount: number;
    columnCount: number;
    floor: number;
    planes: Buffer;
  }>(
    `SELECT id, rowCount, columnCount, floor, planes FROM snapshots
     WHERE id IN (SELECT value FROM json_each($1))`,
    [JSON.stringify([...new Set(ids)])],
  );
  return new Map(
    rows.map(({ id, rowCount, columnCount, floor, planes }) => [
      id,
      { id, rows: rowCount, columns: columnCount, floor, planes: unpackPlanes(planes) },
    ]),
  );
}

/** The snapshot as its build tells it once earlier checks are heard; `coverage` null: as its own numbers tell it. */
export function withCoverage(snapshot: SnapshotPlanes, coverage: Buffer | null): SnapshotPlanes {
  if (coverage === null) return snapshot;
  const own = snapshot.planes.filter((plane) => plane.name !== "verdict");
  return { ...snapshot, planes: [...unpackPlanes(coverage), ...own] };
}

export async function loadTiles(reader: Reader, ids: Iterable<number>): Promise<Map<number, StoredTile>> {
  const rows = await reader.select<{ id: number; encoding: number; data: Buffer }>(
    "SELECT id, encoding, data FROM tiles WHERE id IN (SELECT value FROM json_each($1))",
    [JSON.stringify([...new Set(ids)])],
  );
  return new Map(rows.map(({ id, encoding, data }) => [id, { encoding, data }]));
}

/** Tile ids of one plane; empty where the snapshot has none of that name. */
export function tilesOf(
  planes: readonly PlaneTiles<number>[],
  name: PlaneName,
  reference = 0,
  step = 0,
): readonly number[] {
  const plane = planes.find((p) => p.name === name && p.reference === reference && p.step === step);
  return plane?.tiles ?? [];
}

/** One whole plane, `length` numbers. Cost: its tiles. */
export async function loadPlane(
  reader: Reader,
  planes: readonly PlaneTiles<number>[],
  name: PlaneName,
  length: number,
  reference = 0,
  step = 0,
): Promise<ArrayBuffer> {
  const ids = tilesOf(planes, name, reference, step);
  const tiles = await loadTiles(reader, ids);
  return assemble(
    name,
    ids.map((id) => tiles.get(id) as StoredTile),
    length,
  );
}

/** The numbers of a plane at some entries only, read from the tiles that hold them. */
export class SparsePlane {
  private readonly name: PlaneName;
  private readonly ids: readonly number[];
  private readonly tiles: ReadonlyMap<number, StoredTile>;
  private readonly decoded = new Map<number, DataView>();

  constructor(name: PlaneName, ids: readonly number[], tiles: ReadonlyMap<number, StoredTile>) {
    this.name = name;
    this.ids = ids;
    this.tiles = tiles;
  }

  /** The number at a flat index; its tile must be among those given. */
  at(entry: number): number {
    const index = Math.floor(entry / TILE_ENTRIES);
    const within = entry % TILE_ENTRIES;
    const view = this.viewOf(index);
    const width = PLANE_WIDTH[this.name];
    if (width === 8) return view.getFloat64(within * 8, true);
    return width === 4 ? view.getFloat32(within * 4, true) : view.getUint8(within);
  }

  private viewOf(index: number): DataView {
    const known = this.decoded.get(index);
    if (known) return known;
    const tile = this.tiles.get(this.ids[index]);
    if (!tile) throw new RangeError(`tile ${index} of plane ${this.name} was not loaded`);
    const bytes = decodeTile(tile.encoding, tile.data, PLANE_WIDTH[this.name]);
    const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
    this.decoded.set(index, view);
    return view;
  }
}

/** Indices of the tiles that hold the given entries (flat, ascending or not). */
export function tileIndicesOf(entries: Iterable<number>): Set<number> {
  const indices = new Set<number>();
  for (const entry of entries) indices.add(Math.floor(entry / TILE_ENTRIES));
  return indices;
}

/** Planes of several snapshots at some entries, with one query for all their tiles. */
export async function loadSparsePlanes<N extends PlaneName>(
  reader: Reader,
  wanted: readonly { readonly snapshot: SnapshotPlanes; readonly entries: Iterable<number> }[],
  names: readonly N[],
): Promise<Record<N, SparsePlane>[]> {
  const ids = new Set<number>();
  for (const { snapshot, entries } of wanted) {
    const indices = tileIndicesOf(entries);
    for (const name of names) {
      const tiles = tilesOf(snapshot.planes, name);
      for (const index of indices) ids.add(tiles[index]);
    }
  }
  const tiles = await loadTiles(reader, ids);
  return wanted.map(
    ({ snapshot }) =>
      Object.fromEntries(
        names.map((name) => [name, new SparsePlane(name, tilesOf(snapshot.planes, name), tiles)]),
      ) as Record<N, SparsePlane>,
  );
}
