import type { ProbeResult } from "../../../shared/schemas/block.ts";
import type { Reader } from "../../db/reader.ts";
import type { BlockDetails } from "../../ingest/blockDetails.ts";
import type { LoadedBlock } from "./loadBlockRows.ts";

/** What a build has beside a block under the same names. */
export interface Kin {
  readonly probes: readonly ProbeResult[];
  /** The block of the Jacobian, where the block is itself a probe and the build has one. */
  readonly probeOf: string | null;
}

interface KinRow {
  readonly blockId: number;
  readonly probe: string;
  /** JSON: ProbeDetails, or null. */
  readonly told: string | null;
}

/** The probes of a block's Jacobian in its build, by kind and label. */
export async function loadKin(reader: Reader, projectId: number, block: LoadedBlock): Promise<Kin> {
  const rows = await reader.select<KinRow>(
    `SELECT bb.blockId, b.probe, d.details -> '$.probe' AS told
     FROM blocks b JOIN build_blocks bb ON bb.blockId = b.id JOIN block_details d ON d.id = bb.detailsId
     WHERE bb.buildId = $1 AND b.projectId = $2 AND b.model = $3 AND b.point = $4 AND b.output = $5 AND b.input = $6
     ORDER BY b.probe`,
    [block.buildId, projectId, block.model, block.point, block.output, block.input],
  );
  const jacobian = rows.find(({ probe }) => probe === "");
  return {
    probes: rows.flatMap((row) => (row.told === null ? [] : [presentProbe(row.blockId, row.told)])),
    probeOf: block.probe === "" || jacobian === undefined ? null : String(jacobian.blockId),
  };
}

function presentProbe(blockId: number, told: string): ProbeResult {
  const probe = JSON.parse(told) as NonNullable<BlockDetails["probe"]>;
  return {
    blockId: String(blockId),
    kind: probe.kind,
    label: probe.label,
    verdict: probe.verdict,
    error: probe.error,
    uncertainty: probe.uncertainty,
    resolution: probe.resolution,
    tolerance: probe.tolerance,
    assumed: probe.assumed,
    slope: probe.slope,
    usableSteps: probe.usableSteps,
    steps: [...probe.steps],
    remainders: [...probe.remainders],
    sentence: probe.sentence,
  };
}
