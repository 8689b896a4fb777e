import type { Reader } from "../db/reader.ts";
import type { StoredTile } from "../ingest/assemble.ts";
import type { SideDetails } from "../ingest/blockDetails.ts";
import type { MotionTask, StoredSide } from "../ingest/judgeMotion.ts";
import { loadTiles, tilesOf } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";

/** A block that changed between a build and the one it is compared with. */
export interface ChangedBlock {
  readonly blockId: number;
  readonly now: SnapshotPlanes;
  readonly before: SnapshotPlanes;
}

const PLANES = ["derivative", "reference", "resolution", "verdict", "outputValues"] as const;

/** What the judge needs of some blocks of a build: the tiles of both sides, and what rows and columns are called. */
export async function loadMotionTasks(
  reader: Reader,
  buildId: number,
  changed: readonly ChangedBlock[],
): Promise<MotionTask[]> {
  const sides = changed.flatMap(({ now, before }) => [now, before]);
  const tiles = await loadTiles(
    reader,
    sides.flatMap((side) => PLANES.flatMap((name) => tilesOf(side.planes, name))),
  );
  const names = await loadNames(
    reader,
    buildId,
    changed.map(({ blockId }) => blockId),
  );
  const plane = (side: SnapshotPlanes, name: (typeof PLANES)[number]) =>
    tilesOf(side.planes, name).map((id) => tiles.get(id) as StoredTile);
  const sideOf = (side: SnapshotPlanes): StoredSide => ({
    floor: side.floor,
    derivative: plane(side, "derivative"),
    reference: plane(side, "reference"),
    resolution: plane(side, "resolution"),
    outputValues: side.planes.some((p) => p.name === "outputValues") ? plane(side, "outputValues") : null,
  });
  return changed.map(({ blockId, now, before }) => ({
    rows: now.rows,
    columns: now.columns,
    now: { ...sideOf(now), verdict: plane(now, "verdict") },
    before: sideOf(before),
    ...(names.get(blockId) as Pick<MotionTask, "rtol" | "names">),
  }));
}

/** By block: what its rows and columns are called, and the tolerance that it was judged with. */
async function loadNames(
  reader: Reader,
  buildId: number,
  blockIds: readonly number[],
): Promise<Map<number, Pick<MotionTask, "rtol" | "names">>> {
  const rows = await reader.select<{
    blockId: number;
    rtol: number;
    output: string;
    input: string;
    outputDetails: string;
    inputDetails: string;
  }>(
    `SELECT bb.blockId, s.rtol, b.output, b.input, d.details -> '$.output' AS outputDetails,
       d.details -> '$.input' AS inputDetails
     FROM build_blocks bb JOIN blocks b ON b.id = bb.blockId
     JOIN snapshots s ON s.id = bb.snapshotId JOIN block_details d ON d.id = bb.detailsId
     WHERE bb.buildId = $1 AND bb.blockId IN (SELECT value FROM json_each($2))`,
    [buildId, JSON.stringify(blockIds)],
  );
  const side = (name: string, details: string) => ({ name, ...(JSON.parse(details) as SideDetails) });
  return new Map(
    rows.map((row) => [
      row.blockId,
      {
        rtol: row.rtol,
        names: { output: side(row.output, row.outputDetails), input: side(row.input, row.inputDetails) },
      },
    ]),
  );
}
