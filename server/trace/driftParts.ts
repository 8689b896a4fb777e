import { TILE_ENTRIES } from "../../shared/domain/limits.ts";
import type { Writer } from "../db/write.ts";
import { DRIFT_PLANES } from "../ingest/judgeDrift.ts";
import type { DriftHappening, DriftTiles } from "../ingest/judgeDrift.ts";
import type { StoredTile } from "../ingest/assemble.ts";
import { packEntries } from "../record/entryList.ts";
import { tilesOf } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";

/**
 * A block's running drift is kept in parts of so many tiles: where one column of a large block changed, only the parts
 * that hold it are gone through, and memory is bounded.
 */
const PART_TILES = 16;
export const PART_ENTRIES = PART_TILES * TILE_ENTRIES;

/** A block in a lane; entries are named by their index only together with the number of columns. */
export interface DriftKey {
  readonly laneId: number;
  readonly blockId: number;
  readonly columns: number;
}

/** Running drift of one part. */
export interface DriftPart {
  readonly lastSnapshotId: number;
  /** Builds with the same numbers since `state` was written, or since the first where there is none. */
  readonly repeats: number;
  /** True where repeating the numbers can never tell anything. */
  readonly quiet: boolean;
  /** Packed; null while every build said the same. */
  readonly state: Buffer | null;
}

export async function loadDriftParts(
  w: Writer,
  { laneId, blockId, columns }: DriftKey,
): Promise<Map<number, DriftPart>> {
  const rows = await w.select<Omit<DriftPart, "quiet"> & { part: number; quiet: 0 | 1 }>(
    `SELECT part, lastSnapshotId, repeats, quiet, state FROM block_drifts
     WHERE laneId = $1 AND blockId = $2 AND columnCount = $3`,
    [laneId, blockId, columns],
  );
  return new Map(rows.map(({ part, quiet, ...row }) => [part, { ...row, quiet: quiet === 1 }]));
}

export async function storeDriftPart(w: Writer, key: DriftKey, part: number, drift: DriftPart): Promise<void> {
  await w.run(
    `INSERT OR REPLACE INTO block_drifts (laneId, blockId, columnCount, part, lastSnapshotId, repeats, quiet, state)
     VALUES ($1, $2, $3, $4, $5, $6, $7, $8)`,
    [key.laneId, key.blockId, key.columns, part, drift.lastSnapshotId, drift.repeats, drift.quiet ? 1 : 0, drift.state],
  );
}

export async function storeHappenings(
  w: Writer,
  key: DriftKey,
  part: number,
  happenings: readonly DriftHappening[],
): Promise<void> {
  const first = part * PART_ENTRIES;
  await w.insertOrIgnore(
    "drift_events",
    ["laneId", "blockId", "columnCount", "buildId", "kind", "onsetBuildId", "entries", "decades", "worstEntry"],
    happenings.map(({ buildId, kind, onsetBuildId, entries, decades, worstEntry }) => [
      key.laneId,
      key.blockId,
      key.columns,
      buildId,
      kind,
      onsetBuildId,
      packEntries(entries.map((entry) => entry + first)),
      decades,
      worstEntry + first,
    ]),
  );
}

/** Entries of a snapshot that lie in a part; 0 where it ends before. */
export function entriesInPart({ rows, columns }: Pick<SnapshotPlanes, "rows" | "columns">, part: number): number {
  return Math.max(0, Math.min(PART_ENTRIES, rows * columns - part * PART_ENTRIES));
}

/** Tile ids of one plane within a part. */
function partTiles(snapshot: SnapshotPlanes, name: (typeof DRIFT_PLANES)[number], part: number): readonly number[] {
  return tilesOf(snapshot.planes, name).slice(part * PART_TILES, (part + 1) * PART_TILES);
}

export function allPartTiles(snapshot: SnapshotPlanes, part: number): number[] {
  return DRIFT_PLANES.flatMap((name) => partTiles(snapshot, name, part));
}

/** True where both say the same in the part. */
export function samePart(a: SnapshotPlanes, b: SnapshotPlanes, part: number): boolean {
  if (a.id === b.id) return true;
  return a.floor === b.floor && allPartTiles(a, part).join() === allPartTiles(b, part).join();
}

export function driftTiles(snapshot: SnapshotPlanes, part: number, tiles: ReadonlyMap<number, StoredTile>): DriftTiles {
  const take = (name: (typeof DRIFT_PLANES)[number]) =>
    partTiles(snapshot, name, part).map((id) => tiles.get(id) as StoredTile);
  return {
    entries: entriesInPart(snapshot, part),
    floor: snapshot.floor,
    derivative: take("derivative"),
    reference: take("reference"),
    resolution: take("resolution"),
    verdict: take("verdict"),
  };
}
