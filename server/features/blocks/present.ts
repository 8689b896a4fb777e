import type { BlockRow } from "../../../shared/schemas/block.ts";
import type { MotionCounts } from "../../../shared/numerics/types.ts";
import type { BlockDetails, SideDetails } from "../../ingest/blockDetails.ts";
import type { StoredWorst } from "../../ingest/judgePosting.ts";
import type { ResolutionBins } from "../../ingest/resolutionBins.ts";
import { presentSignature } from "../../record/storedSignature.ts";
import type { LoadedBlock } from "./loadBlockRows.ts";

export function presentBlockRow(block: LoadedBlock): BlockRow {
  const details = JSON.parse(block.details) as BlockDetails;
  const { entries, agrees, disagrees, unresolved, unreferenced, invalid } = block;
  return {
    blockId: String(block.blockId),
    model: block.model,
    point: block.point,
    probe: block.probe === "" ? null : block.probe,
    output: presentSide(block.output, block.rowCount, details.output),
    input: presentSide(block.input, block.columnCount, details.input),
    rows: block.rowCount,
    columns: block.columnCount,
    counts: { entries, agrees, disagrees, unresolved, unreferenced, invalid },
    carried: block.oldest === null ? null : { entries: block.carried, oldest: block.oldest },
    rtol: block.rtol,
    floor: block.floor,
    resolution: weakestResolution(block),
    worst: block.worst === null ? null : presentWorst(JSON.parse(block.worst) as StoredWorst),
    signatures: [...leftBehindOf(block), ...details.signatures].map(presentSignature),
    motion: block.motionCounts === null ? null : presentMotion(JSON.parse(block.motionCounts) as MotionCounts),
  };
}

/** What the build before told: the simplest explanation there is, so it goes first. */
function leftBehindOf({ leftBehind }: LoadedBlock): BlockDetails["signatures"] {
  return leftBehind === null ? [] : [JSON.parse(leftBehind) as BlockDetails["signatures"][number]];
}

function presentSide(name: string, size: number, side: SideDetails): BlockRow["output"] {
  return { name, size, unit: side.unit, elements: side.elements && [...side.elements] };
}

function presentWorst(worst: StoredWorst): NonNullable<BlockRow["worst"]> {
  const { row, column, verdict, error, derivative, reference, uncertainty } = worst;
  return { row, column, verdict, error, derivative, reference, uncertainty };
}

export function presentMotion(counts: MotionCounts): NonNullable<BlockRow["motion"]> {
  const { still, together, apart } = counts;
  return {
    still,
    together,
    "derivative-only": counts["derivative-only"],
    "model-only": counts["model-only"],
    apart,
  };
}

/** Upper end of the last octave that holds an entry: what the weakest reference could see. */
export function weakestResolution({ resolutions }: Pick<LoadedBlock, "resolutions">): number | null {
  const last = (JSON.parse(resolutions) as ResolutionBins).at(-1);
  return last === undefined ? null : 2 ** last[0];
}
