import { TILE_ENTRIES } from "../../shared/domain/limits.ts";
import type { Reader } from "../db/reader.ts";
import { PLANE_WIDTH } from "../ingest/planes.ts";
import type { PlaneName, PlaneTiles } from "../ingest/planes.ts";
import { oneOfTile, RAW } from "../ingest/tiles.ts";
import { tilesOf } from "./readPlanes.ts";

/** Where an entry's number stands: the planes of a snapshot (or motion) and its flat index there. */
export interface EntryPlace {
  readonly planes: readonly PlaneTiles<number>[];
  readonly entry: number;
}

/**
 * The number of a plane at one entry in each of many snapshots, NaN where a snapshot has no such plane. Of tiles that
 * are stored plain only the bytes of that number are read, so that a long history of one entry stays quick.
 */
export async function loadEntryNumbers(
  reader: Reader,
  name: PlaneName,
  places: readonly EntryPlace[],
): Promise<Float64Array> {
  const width = PLANE_WIDTH[name];
  const tileOf = ({ planes, entry }: EntryPlace) => tilesOf(planes, name)[Math.floor(entry / TILE_ENTRIES)];
  const wanted = new Map<string, { tile: number; within: number }>();
  for (const place of places) {
    const tile = tileOf(place);
    const within = place.entry % TILE_ENTRIES;
    if (tile !== undefined) wanted.set(`${tile} ${within}`, { tile, within });
  }
  const rows = await reader.select<{ tile: number; within: number; encoding: number; bytes: Buffer }>(
    `SELECT w.value ->> 'tile' AS tile, w.value ->> 'within' AS within, t.encoding,
       CASE t.encoding WHEN ${RAW} THEN substr(t.data, 1 + (w.value ->> 'within') * $2, $2) ELSE t.data END AS bytes
     FROM json_each($1) w JOIN tiles t ON t.id = w.value ->> 'tile'`,
    [JSON.stringify([...wanted.values()]), width],
  );
  const numbers = new Map<string, number>();
  for (const { tile, within, encoding, bytes } of rows) {
    const one = encoding === RAW ? bytes : oneOfTile(encoding, bytes, width, within);
    numbers.set(`${tile} ${within}`, numberIn(new DataView(one.buffer, one.byteOffset, width), width));
  }
  return Float64Array.from(places, (place) => numbers.get(`${tileOf(place)} ${place.entry % TILE_ENTRIES}`) ?? NaN);
}

function numberIn(view: DataView, width: 8 | 4 | 1): number {
  if (width === 8) return view.getFloat64(0, true);
  return width === 4 ? view.getFloat32(0, true) : view.getUint8(0);
}
