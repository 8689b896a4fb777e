import type { Reader } from "../../db/reader.ts";
import type { SummedBlock } from "../../record/buildSummary.ts";
import { COUNTS_SQL, JOIN_COVERAGE } from "../../record/countsSql.ts";

/** A block of a build with everything but its numbers. */
export interface LoadedBlock extends SummedBlock {
  readonly buildId: number;
  readonly sha: string;
  readonly lane: string;
  readonly snapshotId: number;
  readonly rowCount: number;
  readonly columnCount: number;
  readonly rtol: number;
  readonly floor: number;
  /** JSON: ResolutionBins. */
  readonly resolutions: string;
  /** JSON: BlockDetails. */
  readonly details: string;
  /** JSON: BlockCosts, or null. */
  readonly costs: string | null;
  /** JSON: MotionCounts, or null. */
  readonly motionCounts: string | null;
  readonly motionPlanes: Buffer | null;
  /** JSON: NamedSignature, or null. */
  readonly leftBehind: string | null;
  /** Builds since the entry was checked that was left longest; null where this build checked all that ever were. */
  readonly oldest: number | null;
  /** Verdicts and ages with earlier checks heard, or null. */
  readonly coveragePlanes: Buffer | null;
}

const SELECT = `
  SELECT bb.blockId, bb.buildId, c.sha, l.name AS lane, b.model, b.point, b.output, b.input, b.probe, bb.snapshotId,
    s.rowCount, s.columnCount, s.rtol, s.floor, ${COUNTS_SQL}, v.counts ->> '$.oldest' AS oldest, v.planes AS coveragePlanes,
    s.worst, s.resolutions, d.details, bb.costs, m.counts AS motionCounts, m.planes AS motionPlanes,
    m.leftBehind
  FROM build_blocks bb JOIN builds u ON u.id = bb.buildId JOIN commits c ON c.id = u.commitId
  JOIN lanes l ON l.id = u.laneId JOIN blocks b ON b.id = bb.blockId JOIN snapshots s ON s.id = bb.snapshotId
  JOIN block_details d ON d.id = bb.detailsId LEFT JOIN motions m ON m.id = bb.motionId
  ${JOIN_COVERAGE}`;

/** All blocks of a build. */
export function loadBlockRows(reader: Reader, projectId: number, buildId: number): Promise<LoadedBlock[]> {
  return reader.select<LoadedBlock>(`${SELECT} WHERE bb.buildId = $2 AND u.projectId = $1`, [projectId, buildId]);
}

export async function loadBlockRow(
  reader: Reader,
  projectId: number,
  buildId: number,
  blockId: number,
): Promise<LoadedBlock | null> {
  const [block] = await reader.select<LoadedBlock>(
    `${SELECT} WHERE bb.buildId = $2 AND u.projectId = $1 AND bb.blockId = $3`,
    [projectId, buildId, blockId],
  );
  return block ?? null;
}

/** Blocks of a build by their ids: `limit` of them after the block `after`. */
export function loadBlockPage(
  reader: Reader,
  buildId: number,
  page: { readonly after: number; readonly limit: number },
): Promise<LoadedBlock[]> {
  return reader.select<LoadedBlock>(
    `${SELECT} WHERE bb.buildId = $1 AND bb.blockId > $2 ORDER BY bb.blockId LIMIT $3`,
    [buildId, page.after, page.limit],
  );
}
