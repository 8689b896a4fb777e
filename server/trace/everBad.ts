import { isBadVerdict } from "../../shared/domain/vocabulary.ts";
import type { Reader } from "../db/reader.ts";
import type { Writer } from "../db/write.ts";
import { packEntries, unionEntries, unpackEntries } from "../record/entryList.ts";
import { loadPlane, loadSnapshots } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";

/**
 * Entries of a block that were bad in some build of the lane: only these have to be traced. An index names an entry
 * only together with the number of columns it was made with: a block posted with another number has other entries.
 */
export interface EverBad {
  readonly blockId: number;
  readonly columns: number;
  /** Flat row-major indices, ascending. */
  readonly entries: Uint32Array;
}

/** In the order of the blocks' names, not of their ids: those tell only which block was posted first. */
export async function loadEverBad(reader: Reader, laneId: number): Promise<EverBad[]> {
  const rows = await reader.select<{ blockId: number; columns: number; everBad: Buffer }>(
    `SELECT d.blockId, d.columnCount AS columns, d.everBad FROM drift_states d JOIN blocks b ON b.id = d.blockId
     WHERE d.laneId = $1 ORDER BY b.model, b.output, b.input, b.point, b.probe, d.columnCount`,
    [laneId],
  );
  return rows.map(({ blockId, columns, everBad }) => ({ blockId, columns, entries: unpackEntries(everBad) }));
}

/** Adds the bad entries of one build. A union, so that the order of builds does not matter. */
export async function addEverBad(w: Writer, laneId: number, buildId: number): Promise<void> {
  const rows = await w.select<{ blockId: number; snapshotId: number }>(
    `SELECT bb.blockId, bb.snapshotId FROM build_blocks bb JOIN snapshots s ON s.id = bb.snapshotId
     WHERE bb.buildId = $1 AND s.disagrees + s.invalid > 0`,
    [buildId],
  );
  if (rows.length === 0) return;
  const key = (blockId: number, columns: number) => `${blockId} ${columns}`;
  const before = new Map((await loadEverBad(w, laneId)).map((one) => [key(one.blockId, one.columns), one.entries]));
  const snapshots = await loadSnapshots(
    w,
    rows.map((row) => row.snapshotId),
  );
  for (const { blockId, snapshotId } of rows) {
    const snapshot = snapshots.get(snapshotId) as SnapshotPlanes;
    const { columns } = snapshot;
    const known = before.get(key(blockId, columns));
    const union = unionEntries(known ?? new Uint32Array(0), await loadBadEntries(w, snapshot));
    if (union === known) continue;
    await w.run("INSERT OR REPLACE INTO drift_states (laneId, blockId, columnCount, everBad) VALUES ($1, $2, $3, $4)", [
      laneId,
      blockId,
      columns,
      packEntries(union),
    ]);
  }
}

/** Flat indices of the entries that disagree or are invalid. */
export async function loadBadEntries(reader: Reader, snapshot: SnapshotPlanes): Promise<Uint32Array> {
  const plane = await loadPlane(reader, snapshot.planes, "verdict", snapshot.rows * snapshot.columns);
  const verdicts = new Uint8Array(plane);
  const bad: number[] = [];
  verdicts.forEach((code, entry) => {
    if (isBadVerdict(code)) bad.push(entry);
  });
  return Uint32Array.from(bad);
}
