import { groupBy } from "../../../shared/domain/groupBy.ts";
import type { Reader } from "../../db/reader.ts";
import type { BlockCosts, ReferenceDetails } from "../../ingest/blockDetails.ts";
import type { LaneBuild } from "../../record/laneBuilds.ts";
import { BlockChecks } from "./blockChecks.ts";

/** A block of the newest build. */
export interface PlannedBlock {
  readonly blockId: number;
  readonly model: string;
  readonly point: string;
  readonly output: string;
  readonly input: string;
  readonly rows: number;
  readonly columns: number;
  readonly sources: readonly string[];
}

/** Builds that are looked through at most: what was checked longer ago has been unreferenced for long. */
const MOST_BUILDS = 1000;
/** At once: builds, and rows of blocks in builds. */
const PAGE = { builds: 50, rows: 20_000 } as const;

/** The Jacobians of a build; probes have no columns to choose from. */
export async function loadPlannedBlocks(reader: Reader, buildId: number): Promise<PlannedBlock[]> {
  const rows = await reader.select<Omit<PlannedBlock, "sources"> & { sources: string }>(
    `SELECT bb.blockId, b.model, b.point, b.output, b.input, s.rowCount AS rows, s.columnCount AS columns,
       d.details ->> '$.sources' AS sources
     FROM build_blocks bb JOIN blocks b ON b.id = bb.blockId JOIN snapshots s ON s.id = bb.snapshotId
     JOIN block_details d ON d.id = bb.detailsId WHERE bb.buildId = $1 AND b.probe = '' ORDER BY bb.blockId`,
    [buildId],
  );
  return rows.map((row) => ({ ...row, sources: JSON.parse(row.sources) as string[] }));
}

interface Row {
  readonly buildId: number;
  readonly blockId: number;
  readonly snapshotId: number;
  readonly detailsId: number;
  readonly columnCount: number;
  readonly unresolved: number;
  readonly costs: string | null;
}

/** The checks of each block, by id: builds are read newest first until the last check of every column is found. */
export async function loadChecks(
  reader: Reader,
  blocks: readonly PlannedBlock[],
  builds: readonly LaneBuild[],
): Promise<Map<number, BlockChecks>> {
  const checks = new Map(blocks.map(({ blockId, columns }) => [blockId, new BlockChecks(columns)]));
  const references = new Map<number, readonly ReferenceDetails[]>();
  const most = Math.min(builds.length, MOST_BUILDS);
  for (let first = 0, count = 0; first < most; first += count) {
    const open = [...checks].filter(([, one]) => !one.complete).map(([blockId]) => blockId);
    if (open.length === 0) break;
    count = Math.max(1, Math.min(PAGE.builds, Math.floor(PAGE.rows / open.length), most - first));
    const rows = await loadRows(reader, builds.slice(first, first + count), open);
    await addReferences(reader, references, rows);
    for (let ago = first; ago < first + count; ago++) {
      const { id: buildId, sha } = builds[ago];
      for (const { blockId, detailsId, costs, ...row } of rows.get(buildId) ?? []) {
        checks.get(blockId)?.add({
          ...row,
          ago,
          buildId,
          sha,
          references: references.get(detailsId) ?? [],
          costs: costs === null ? null : (JSON.parse(costs) as BlockCosts),
        });
      }
    }
  }
  return checks;
}

async function loadRows(
  reader: Reader,
  builds: readonly LaneBuild[],
  blockIds: readonly number[],
): Promise<Map<number, Row[]>> {
  const rows = await reader.select<Row>(
    `SELECT bb.buildId, bb.blockId, bb.snapshotId, bb.detailsId, s.columnCount, s.unresolved, bb.costs
     FROM build_blocks bb JOIN snapshots s ON s.id = bb.snapshotId
     WHERE bb.buildId IN (SELECT value FROM json_each($1)) AND bb.blockId IN (SELECT value FROM json_each($2))`,
    [JSON.stringify(builds.map(({ id }) => id)), JSON.stringify(blockIds)],
  );
  return groupBy(rows, (row) => row.buildId);
}

/** Details are shared by the builds that say the same: each is read once. */
async function addReferences(
  reader: Reader,
  known: Map<number, readonly ReferenceDetails[]>,
  rows: ReadonlyMap<number, readonly Row[]>,
): Promise<void> {
  const ids = new Set([...rows.values()].flat().map((row) => row.detailsId));
  const fresh = [...ids].filter((id) => !known.has(id));
  const read = await reader.select<{ id: number; text: string }>(
    `SELECT id, details ->> '$.references' AS text FROM block_details WHERE id IN (SELECT value FROM json_each($1))`,
    [JSON.stringify(fresh)],
  );
  for (const { id, text } of read) known.set(id, JSON.parse(text) as ReferenceDetails[]);
}
