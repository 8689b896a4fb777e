import { adviseReference } from "../../../shared/numerics/steps/adviseReference.ts";
import type { Told } from "../../../shared/numerics/steps/adviseReference.ts";
import { studyTotals } from "../../../shared/numerics/steps/studyTotals.ts";
import type { ColumnStudy, Pooled, StepStudy } from "../../../shared/numerics/steps/types.ts";
import type { ReferenceFinding } from "../../../shared/numerics/types.ts";
import { toWire } from "../../../shared/schemas/common.ts";
import type { ColumnStudyRow, StepStudyAnswer } from "../../../shared/schemas/steps.ts";
import type { BlockDetails } from "../../ingest/blockDetails.ts";
import type { LoadedBlock } from "../blocks/loadBlockRows.ts";

export function presentStepStudy(
  block: LoadedBlock,
  reference: number,
  window: readonly [number, number],
  study: StepStudy,
): StepStudyAnswer {
  const { method, measured, stated, rtol } = study;
  const { entries, resolved, candidates } = studyTotals(study);
  return {
    reference,
    method,
    measured,
    stated,
    rtol,
    floor: block.floor,
    window: [...window],
    blockColumns: block.columnCount,
    totals: {
      entries,
      resolved,
      candidates: candidates.map(({ method, step, resolved }) => ({ method, step, resolved })),
    },
    advice: adviseReference(study, findingsOf(block)),
    columns: study.columns.map(presentColumn),
  };
}

/** What the block's references said of themselves: its signatures have them, as shares of its entries. */
function findingsOf({ details, entries }: LoadedBlock): Told[] {
  const { signatures } = JSON.parse(details) as BlockDetails;
  return signatures.flatMap(({ code, share }) =>
    isFinding(code) ? [{ code, entries: Math.max(1, Math.round(share * entries)) }] : [],
  );
}

function isFinding(code: string): code is ReferenceFinding["code"] {
  return code.startsWith("reference");
}

function presentColumn(column: ColumnStudy): ColumnStudyRow {
  const { curve } = column;
  return {
    column: column.column,
    entries: column.entries,
    quiet: column.quiet,
    steps: column.steps.map(({ step, posted, branch, truncation, rounding, uncertainty, chosen }) => ({
      step,
      posted,
      branch,
      truncation: presentPooled(truncation),
      rounding: presentPooled(rounding),
      uncertainty: presentPooled(uncertainty),
      chosen,
    })),
    curve: curve && {
      order: curve.order,
      truncation: toWire(curve.truncation),
      rounding: toWire(curve.rounding),
      floor: toWire(curve.floor),
    },
    resolved: column.resolved,
    candidates: column.candidates.map(({ method, step, resolution, resolved }) => ({
      method,
      step,
      resolution: resolution && presentPooled(resolution),
      resolved,
    })),
    truncated: column.truncated,
    cancelled: column.cancelled,
  };
}

function presentPooled({ median, largest }: Pooled): ColumnStudyRow["steps"][number]["truncation"] {
  return { median: toWire(median), largest: toWire(largest) };
}
