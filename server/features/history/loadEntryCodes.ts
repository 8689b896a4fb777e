import type { Reader } from "../../db/reader.ts";
import { unpackPlanes } from "../../ingest/planes.ts";
import { loadEntryNumbers } from "../../record/readEntry.ts";

/** The content-addressed table that a plane of codes told from other builds is in. */
const TABLE = { motion: "motions", verdict: "coverages", age: "coverages" } as const;

/** The code of one entry in each of many stored planes, null where there is none (`id` null). */
export async function loadEntryCodes(
  reader: Reader,
  name: keyof typeof TABLE,
  places: readonly { readonly id: number | null; readonly entry: number }[],
): Promise<(number | null)[]> {
  const ids = new Set(places.flatMap(({ id }) => id ?? []));
  if (ids.size === 0) return places.map(() => null);
  const stored = await reader.select<{ id: number; planes: Buffer }>(
    `SELECT id, planes FROM ${TABLE[name]} WHERE id IN (SELECT value FROM json_each($1))`,
    [JSON.stringify([...ids])],
  );
  const planesById = new Map(stored.map(({ id, planes }) => [id, unpackPlanes(planes)]));
  const codes = await loadEntryNumbers(
    reader,
    name,
    places.map(({ id, entry }) => ({ planes: (id !== null && planesById.get(id)) || [], entry })),
  );
  return Array.from(codes, (code) => (Number.isNaN(code) ? null : code));
}
