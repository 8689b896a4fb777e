import { VERDICT_CODE } from "../../shared/domain/vocabulary.ts";
import type { Reader } from "../db/reader.ts";
import type { Writer } from "../db/write.ts";
import { packEntries, unionEntries, unpackEntries } from "../record/entryList.ts";
import { loadPlane, loadSnapshots } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";

/** Entries of each block of the lane that were bad in any of its builds: only these have to be traced. */
export async function loadEverBad(reader: Reader, laneId: number): Promise<Map<number, Uint32Array>> {
  const rows = await reader.select<{ blockId: number; everBad: Buffer }>(
    "SELECT blockId, everBad FROM drift_states WHERE laneId = $1 ORDER BY blockId",
    [laneId],
  );
  return new Map(rows.map(({ blockId, everBad }) => [blockId, unpackEntries(everBad)]));
}

/** Adds the bad entries of one build. A union, so that the order of builds does not matter. */
export async function addEverBad(w: Writer, laneId: number, buildId: number): Promise<void> {
  const rows = await w.select<{ blockId: number; snapshotId: number }>(
    `SELECT bb.blockId, bb.snapshotId FROM build_blocks bb JOIN snapshots s ON s.id = bb.snapshotId
     WHERE bb.buildId = $1 AND s.disagrees + s.invalid > 0`,
    [buildId],
  );
  if (rows.length === 0) return;
  const before = await loadEverBad(w, laneId);
  const snapshots = await loadSnapshots(
    w,
    rows.map((row) => row.snapshotId),
  );
  for (const { blockId, snapshotId } of rows) {
    const known = before.get(blockId) ?? new Uint32Array(0);
    const bad = await loadBadEntries(w, snapshots.get(snapshotId) as SnapshotPlanes);
    const union = unionEntries(known, bad);
    if (union === known) continue;
    await w.run("INSERT OR REPLACE INTO drift_states (laneId, blockId, everBad) VALUES ($1, $2, $3)", [
      laneId,
      blockId,
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
    if (code === VERDICT_CODE.disagrees || code === VERDICT_CODE.invalid) bad.push(entry);
  });
  return Uint32Array.from(bad);
}
