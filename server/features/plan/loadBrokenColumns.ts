import type { Reader } from "../../db/reader.ts";
import { unpackEntries } from "../../record/entryList.ts";
import { loadUnwaived } from "../breaks/loadUnwaived.ts";
import { columnsOf } from "./byColumn.ts";
import type { ByColumn, PlanPlace } from "./byColumn.ts";
import type { PlannedBlock } from "./loadChecks.ts";

/** A column's part in open breaks. */
export interface BrokenColumn {
  readonly entries: number;
  /** Running numbers of the breaks, as people know them. */
  readonly numbers: readonly number[];
}

/** Columns with entries in open breaks that nobody accepted. */
export async function loadBrokenColumns(
  reader: Reader,
  { projectId, lane, now }: PlanPlace,
  blocks: readonly PlannedBlock[],
): Promise<ByColumn<BrokenColumn>> {
  const open = await loadUnwaived(reader, projectId, lane, now);
  const numberOf = new Map(open.map(({ id, number }) => [id, number]));
  const rows = await reader.select<{ breakId: number; blockId: number; columnCount: number; entries: Buffer }>(
    `SELECT breakId, blockId, columnCount, entries FROM break_entries
     WHERE breakId IN (SELECT value FROM json_each($1)) ORDER BY breakId`,
    [JSON.stringify([...numberOf.keys()])],
  );
  const shapes = columnsOf(blocks);
  const found = new Map<number, Map<number, BrokenColumn>>();
  for (const { breakId, blockId, columnCount, entries } of rows) {
    if (shapes.get(blockId) !== columnCount) continue;
    const ofBlock = found.get(blockId) ?? new Map<number, BrokenColumn>();
    found.set(blockId, ofBlock);
    for (const entry of unpackEntries(entries)) {
      const column = entry % columnCount;
      const known = ofBlock.get(column) ?? { entries: 0, numbers: [] };
      const number = numberOf.get(breakId) as number;
      const numbers = known.numbers.includes(number) ? known.numbers : [...known.numbers, number];
      ofBlock.set(column, { entries: known.entries + 1, numbers });
    }
  }
  return found;
}
