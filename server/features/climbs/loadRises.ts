import type { DriftRise } from "../../../shared/history/groupClimbs.ts";
import type { Reader } from "../../db/reader.ts";
import { unpackEntries } from "../../record/entryList.ts";

interface EventRow {
  readonly blockId: number;
  readonly model: string;
  readonly probe: string;
  readonly columns: number;
  readonly buildId: number;
  readonly kind: "climb" | "jump" | "end";
  readonly onsetBuildId: number;
  readonly entries: Buffer;
  readonly decades: number;
  readonly worstEntry: number;
}

/** What drift told in a lane, by places in its chain of builds. */
export async function loadRises(
  reader: Reader,
  laneId: number,
  placeOf: ReadonlyMap<number, number>,
): Promise<DriftRise[]> {
  const rows = await reader.select<EventRow>(
    `SELECT e.blockId, b.model, b.probe, e.columnCount AS columns, e.buildId, e.kind, e.onsetBuildId, e.entries, e.decades,
       e.worstEntry
     FROM drift_events e JOIN blocks b ON b.id = e.blockId WHERE e.laneId = $1
     ORDER BY b.model, b.output, b.input, b.point, b.probe, e.columnCount, e.worstEntry`,
    [laneId],
  );
  const keyOf = (row: EventRow) => `${row.blockId} ${row.columns} ${row.onsetBuildId}`;
  const ends = new Map<string, { at: number; entries: Uint32Array }[]>();
  for (const row of rows) {
    const at = placeOf.get(row.buildId);
    if (row.kind !== "end" || at === undefined) continue;
    ends.set(keyOf(row), [...(ends.get(keyOf(row)) ?? []), { at, entries: unpackEntries(row.entries) }]);
  }
  return rows.flatMap((row): DriftRise[] => {
    const told = placeOf.get(row.buildId);
    const onset = placeOf.get(row.onsetBuildId);
    if (row.kind === "end" || told === undefined || onset === undefined) return [];
    const entries = unpackEntries(row.entries);
    return [
      {
        blockId: row.blockId,
        model: row.model,
        probe: row.probe,
        columns: row.columns,
        kind: row.kind,
        onset,
        told,
        entries,
        decades: row.decades,
        worstEntry: row.worstEntry,
        ends: row.kind === "jump" ? [] : among(entries, ends.get(keyOf(row)) ?? []),
      },
    ];
  });
}

/** Entries of one onset may have been told in several builds: an end counts for those that it names. */
function among(entries: Uint32Array, ends: readonly { at: number; entries: Uint32Array }[]): DriftRise["ends"] {
  const mine = new Set(entries);
  return ends
    .map((end) => ({ at: end.at, entries: end.entries.filter((entry) => mine.has(entry)) }))
    .filter((end) => end.entries.length > 0);
}
