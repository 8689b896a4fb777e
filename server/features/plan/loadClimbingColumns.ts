import type { Reader } from "../../db/reader.ts";
import { loadRises } from "../climbs/loadRises.ts";
import { columnsOf } from "./byColumn.ts";
import type { ByColumn, PlanPlace } from "./byColumn.ts";
import type { LaneLine } from "./laneLine.ts";
import type { PlannedBlock } from "./loadChecks.ts";

/** Columns with climbs that have not ended: the decades told of the steepest. */
export async function loadClimbingColumns(
  reader: Reader,
  { laneId }: PlanPlace,
  { builds }: LaneLine,
  blocks: readonly PlannedBlock[],
): Promise<ByColumn<number>> {
  const rises = await loadRises(reader, laneId, new Map(builds.map(({ id }, at) => [id, builds.length - 1 - at])));
  const shapes = columnsOf(blocks);
  const found = new Map<number, Map<number, number>>();
  for (const { kind, blockId, columns, entries, ends, decades } of rises) {
    if (kind !== "climb" || shapes.get(blockId) !== columns) continue;
    const ofBlock = found.get(blockId) ?? new Map<number, number>();
    found.set(blockId, ofBlock);
    const ended = new Set(ends.flatMap((end) => [...end.entries]));
    for (const entry of entries) {
      const column = entry % columns;
      if (!ended.has(entry)) ofBlock.set(column, Math.max(ofBlock.get(column) ?? 0, decades));
    }
  }
  return found;
}
