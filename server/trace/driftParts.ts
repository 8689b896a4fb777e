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
  /** Packed; "none" while every build said the same, "in the record" while it was not read. */
  readonly state: Uint8Array | "none" | "in the record";
}

export interface PlacedPart extends DriftKey {
  readonly part: number;
}

/** A name for maps. */
export const partKey = ({ blockId, columns, part }: Omit<PlacedPart, "laneId">) => `${blockId} ${columns} ${part}`;

/** All parts of some blocks of a lane, without their states: those are read when they are needed. */
export async function loadDriftParts(
  w: Writer,
  laneId: number,
  blockIds: readonly number[],
): Promise<Map<string, DriftPart>> {
  const rows = await w.select<{
    blockId: number;
    columns: number;
    part: number;
    lastSnapshotId: number;
    repeats: number;
    quiet: 0 | 1;
    stateless: 0 | 1;
  }>(
    `SELECT blockId, columnCount AS columns, part, lastSnapshotId, repeats, quiet, state IS NULL AS stateless
     FROM block_drifts WHERE laneId = $1 AND blockId IN (SELECT value FROM json_each($2))`,
    [laneId, JSON.stringify(blockIds)],
  );
  return new Map(
    rows.map(({ lastSnapshotId, repeats, quiet, stateless, ...place }) => [
      partKey(place),
      { lastSnapshotId, repeats, quiet: quiet === 1, state: stateless === 1 ? "none" : "in the record" },
    ]),
  );
}

/** States of some parts of a lane, by `partKey`. */
export async function loadDriftStates(w: Writer, parts: readonly PlacedPart[]): Promise<Map<string, Buffer>> {
  if (parts.length === 0) return new Map();
  const rows = await w.select<{ blockId: number; columns: number; part: number; state: Buffer }>(
    `SELECT d.blockId, d.columnCount AS columns, d.part, d.state
     FROM json_each($2) p JOIN block_drifts d ON d.laneId = $1 AND d.blockId = p.value ->> 0
       AND d.columnCount = p.value ->> 1 AND d.part = p.value ->> 2`,
    [parts[0].laneId, JSON.stringify(parts.map(({ blockId, columns, part }) => [blockId, columns, part]))],
  );
  return new Map(rows.map(({ state, ...place }) => [partKey(place), state]));
}

const ROWS_PER_STATEMENT = 50;

/** Writes parts over what was known of them. A state that was not read stays as it is in the record. */
export async function storeDriftParts(
  w: Writer,
  parts: readonly { readonly place: PlacedPart; readonly drift: DriftPart }[],
): Promise<void> {
  const kept = parts.filter(({ drift }) => drift.state === "in the record");
  for (const { place, drift } of kept) {
    await w.run(
      `UPDATE block_drifts SET lastSnapshotId = $5, repeats = $6
       WHERE laneId = $1 AND blockId = $2 AND columnCount = $3 AND part = $4`,
      [place.laneId, place.blockId, place.columns, place.part, drift.lastSnapshotId, drift.repeats],
    );
  }
  await w.insertOrReplace(
    "block_drifts",
    ["laneId", "blockId", "columnCount", "part", "lastSnapshotId", "repeats", "quiet", "state"],
    parts
      .filter(({ drift }) => drift.state !== "in the record")
      .map(({ place, drift }) => [
        place.laneId,
        place.blockId,
        place.columns,
        place.part,
        drift.lastSnapshotId,
        drift.repeats,
        drift.quiet ? 1 : 0,
        drift.state instanceof Uint8Array
          ? Buffer.from(drift.state.buffer, drift.state.byteOffset, drift.state.byteLength)
          : null,
      ]),
    ROWS_PER_STATEMENT,
  );
}

export async function storeHappenings(
  w: Writer,
  told: readonly { readonly place: PlacedPart; readonly happening: DriftHappening }[],
): Promise<void> {
  await w.insertOrIgnore(
    "drift_events",
    ["laneId", "blockId", "columnCount", "buildId", "kind", "onsetBuildId", "entries", "decades", "worstEntry"],
    told.map(({ place, happening }) => {
      const first = place.part * PART_ENTRIES;
      const { buildId, kind, onsetBuildId, entries, decades, worstEntry } = happening;
      return [
        place.laneId,
        place.blockId,
        place.columns,
        buildId,
        kind,
        onsetBuildId,
        packEntries(entries.map((entry) => entry + first)),
        decades,
        worstEntry + first,
      ];
    }),
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
