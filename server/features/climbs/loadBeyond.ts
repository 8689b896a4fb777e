import { isBadVerdict } from "../../../shared/domain/vocabulary.ts";
import type { ClimbGroup } from "../../../shared/history/groupClimbs.ts";
import type { Reader } from "../../db/reader.ts";
import { loadSnapshots, loadSparsePlanes } from "../../record/readPlanes.ts";

/** How many entries of a climb are past the tolerance in a build, by the build's own verdicts. */
export async function loadBeyond(reader: Reader, { members }: ClimbGroup, buildId: number): Promise<number> {
  const rows = await reader.select<{ blockId: number; snapshotId: number }>(
    `SELECT blockId, snapshotId FROM build_blocks
     WHERE buildId = $1 AND blockId IN (SELECT value FROM json_each($2))`,
    [buildId, JSON.stringify(members.map(({ blockId }) => blockId))],
  );
  const snapshots = await loadSnapshots(
    reader,
    rows.map((row) => row.snapshotId),
  );
  const snapshotOf = new Map(rows.map((row) => [row.blockId, snapshots.get(row.snapshotId)]));
  const wanted = members.flatMap(({ blockId, columns, entries }) => {
    const snapshot = snapshotOf.get(blockId);
    if (snapshot?.columns !== columns) return [];
    return [{ snapshot, entries: entries.filter((entry) => entry < snapshot.rows * columns) }];
  });
  const planes = await loadSparsePlanes(reader, wanted, ["verdict"]);
  return wanted.reduce(
    (sum, { entries }, at) => sum + entries.filter((entry) => isBadVerdict(planes[at].verdict.at(entry))).length,
    0,
  );
}
