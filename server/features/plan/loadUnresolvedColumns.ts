import { VERDICT_CODE } from "../../../shared/domain/vocabulary.ts";
import type { Reader } from "../../db/reader.ts";
import { loadPlane, loadSnapshots } from "../../record/readPlanes.ts";
import type { BlockChecks } from "./blockChecks.ts";
import type { ByColumn } from "./byColumn.ts";
import type { PlannedBlock } from "./loadChecks.ts";

/** Entries that the last check of each column left unresolved. */
export async function loadUnresolvedColumns(
  reader: Reader,
  blocks: readonly PlannedBlock[],
  checks: ReadonlyMap<number, BlockChecks>,
): Promise<ByColumn<number>> {
  const found = new Map<number, Map<number, number>>();
  for (const { blockId, columns } of blocks) {
    const ofBlock = new Map<number, number>();
    const { checks: builds, checkOf } = checks.get(blockId) as BlockChecks;
    for (const [place, { snapshotId, unresolved }] of builds.entries()) {
      if (unresolved === 0) continue;
      const snapshot = (await loadSnapshots(reader, [snapshotId])).get(snapshotId);
      if (snapshot === undefined) continue;
      const verdicts = new Uint8Array(
        await loadPlane(reader, snapshot.planes, "verdict", snapshot.rows * snapshot.columns),
      );
      verdicts.forEach((code, entry) => {
        const column = entry % columns;
        if (code !== VERDICT_CODE.unresolved || checkOf[column] !== place) return;
        ofBlock.set(column, (ofBlock.get(column) ?? 0) + 1);
      });
    }
    if (ofBlock.size > 0) found.set(blockId, ofBlock);
  }
  return found;
}
