import type { BlockName } from "../../../shared/domain/selector.ts";
import type { Reader } from "../../db/reader.ts";
import { unpackEntries } from "../../record/entryList.ts";
import { ENTRY_PLANES, entryValuesAt } from "../../record/entryValues.ts";
import type { EntryValues } from "../../record/entryValues.ts";
import { loadSnapshots, loadSparsePlanes } from "../../record/readPlanes.ts";

/** Entries of one block that belong to a break. */
export interface BreakBlock extends BlockName {
  readonly blockId: number;
  /** Columns that the indices were counted with. */
  readonly columns: number;
  /** Flat indices, ascending. */
  readonly entries: Uint32Array;
}

export async function loadBreakBlocks(reader: Reader, breakId: number): Promise<BreakBlock[]> {
  const rows = await reader.select<Omit<BreakBlock, "entries"> & { entries: Buffer }>(
    `SELECT e.blockId, b.model, b.output, b.input, b.point, b.probe, e.columnCount AS columns, e.entries
     FROM break_entries e JOIN blocks b ON b.id = e.blockId WHERE e.breakId = $1
     ORDER BY b.model, b.output, b.input, b.point, b.probe, e.columnCount`,
    [breakId],
  );
  return rows.map((row) => ({ ...row, entries: unpackEntries(row.entries) }));
}

/** The numbers of a block's entries in a build, or null for an entry that the build does not have. */
export type BlockValues = (entry: number) => EntryValues | null;

/**
 * What a build says of the entries of blocks, in the order of the blocks. Reads only the tiles that hold them. A block
 * that was posted with another number of columns has other entries.
 */
export async function loadValues(
  reader: Reader,
  buildId: number,
  blocks: readonly Pick<BreakBlock, "blockId" | "columns" | "entries">[],
): Promise<BlockValues[]> {
  const rows = await reader.select<{ blockId: number; snapshotId: number }>(
    `SELECT blockId, snapshotId FROM build_blocks
     WHERE buildId = $1 AND blockId IN (SELECT value FROM json_each($2))`,
    [buildId, JSON.stringify(blocks.map((block) => block.blockId))],
  );
  const snapshots = await loadSnapshots(
    reader,
    rows.map((row) => row.snapshotId),
  );
  const snapshotOf = new Map(rows.map((row) => [row.blockId, snapshots.get(row.snapshotId)]));
  const wanted = blocks.flatMap((block, at) => {
    const snapshot = snapshotOf.get(block.blockId);
    if (snapshot?.columns !== block.columns) return [];
    const size = snapshot.rows * snapshot.columns;
    return [{ at, snapshot, size, entries: block.entries.filter((entry) => entry < size) }];
  });
  const planes = await loadSparsePlanes(reader, wanted, ENTRY_PLANES);
  const values: BlockValues[] = blocks.map(() => () => null);
  wanted.forEach(({ at, snapshot, size }, w) => {
    values[at] = (entry) => (entry < size ? entryValuesAt(planes[w], entry, snapshot.floor) : null);
  });
  return values;
}

export interface BreakEntryValues {
  readonly block: BreakBlock;
  readonly entry: number;
  readonly values: EntryValues;
  readonly before: EntryValues | null;
}

/** What has no relative error is not finite: nothing is worse. */
function magnitude({ error }: EntryValues): number {
  return Number.isNaN(error) ? Infinity : error;
}

/** The worst entries of a break in the build of its onset, at most `most`, with what they were at the last good one. */
export async function loadWorstEntries(
  reader: Reader,
  blocks: readonly BreakBlock[],
  onsetBuildId: number,
  lastGoodBuildId: number | null,
  most: number,
): Promise<BreakEntryValues[]> {
  const onset = await loadValues(reader, onsetBuildId, blocks);
  const all = blocks.flatMap((block, at) =>
    Array.from(block.entries).flatMap((entry) => {
      const values = onset[at](entry);
      return values === null ? [] : [{ at, entry, values }];
    }),
  );
  all.sort((a, b) => (magnitude(a.values) === magnitude(b.values) ? 0 : magnitude(b.values) - magnitude(a.values)));
  const shown = all.slice(0, most);
  const narrowed = blocks.map(({ blockId, columns }, at) => ({
    blockId,
    columns,
    entries: Uint32Array.from(shown.filter((one) => one.at === at).map((one) => one.entry)),
  }));
  const before = lastGoodBuildId === null ? null : await loadValues(reader, lastGoodBuildId, narrowed);
  return shown.map(({ at, entry, values }) => ({
    block: blocks[at],
    entry,
    values,
    before: before === null ? null : before[at](entry),
  }));
}
