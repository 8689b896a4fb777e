import type { Reader } from "../../db/reader.ts";
import { unpackEntries } from "../../record/entryList.ts";
import { columnsOf } from "./byColumn.ts";
import type { ByColumn, PlanPlace } from "./byColumn.ts";
import type { PlannedBlock } from "./loadChecks.ts";

/** Columns with climbs that have not ended: the decades told of the steepest. */
export async function loadClimbingColumns(
  reader: Reader,
  { laneId }: PlanPlace,
  blocks: readonly PlannedBlock[],
): Promise<ByColumn<number>> {
  const rows = await reader.select<{
    blockId: number;
    columnCount: number;
    onsetBuildId: number;
    kind: "climb" | "end";
    entries: Buffer;
    decades: number;
  }>(
    `SELECT blockId, columnCount, onsetBuildId, kind, entries, decades FROM drift_events
     WHERE laneId = $1 AND kind IN ('climb', 'end') ORDER BY blockId, kind = 'climb'`,
    [laneId],
  );
  const shapes = columnsOf(blocks);
  const ended = new Set<string>();
  const found = new Map<number, Map<number, number>>();
  for (const { blockId, columnCount, onsetBuildId, kind, entries, decades } of rows) {
    if (shapes.get(blockId) !== columnCount) continue;
    const ofBlock = found.get(blockId) ?? new Map<number, number>();
    found.set(blockId, ofBlock);
    for (const entry of unpackEntries(entries)) {
      const key = `${blockId} ${onsetBuildId} ${entry}`;
      if (kind === "end") ended.add(key);
      else if (!ended.has(key)) {
        const column = entry % columnCount;
        ofBlock.set(column, Math.max(ofBlock.get(column) ?? 0, decades));
      }
    }
  }
  return found;
}
