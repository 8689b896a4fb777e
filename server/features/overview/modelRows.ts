import { groupBy } from "../../../shared/domain/groupBy.ts";
import { jacobianKey } from "../../../shared/domain/selector.ts";
import type { MotionCounts } from "../../../shared/numerics/types.ts";
import type { ModelRow } from "../../../shared/schemas/project.ts";
import { addUp, checkedShare, isWorse, worstOf } from "../../record/buildSummary.ts";
import type { LoadedBlock } from "../blocks/loadBlockRows.ts";
import { presentMotion, weakestResolution } from "../blocks/present.ts";
import { finiteOrNull } from "../history/loadStrip.ts";
import { resolutionOf } from "./resolution.ts";

/** Blocks of one build, gathered by model; the models with the worst entry first. */
export function modelRows(blocks: readonly LoadedBlock[]): ModelRow[] {
  const rows = [...groupBy(blocks, (block) => block.model)].map(([model, members]) => {
    const worst = worstOf(members);
    return { row: modelRow(model, members, worst), worst };
  });
  rows.sort((a, b) => {
    if (a.worst && b.worst && isWorse(a.worst.entry, b.worst.entry)) return -1;
    if (a.worst && b.worst && isWorse(b.worst.entry, a.worst.entry)) return 1;
    return a.row.model < b.row.model ? -1 : 1;
  });
  return rows.map(({ row }) => row);
}

function modelRow(
  model: string,
  blocks: readonly LoadedBlock[],
  worst: ReturnType<typeof worstOf<LoadedBlock>>,
): ModelRow {
  const counts = addUp(blocks);
  const { resolvedShare, weakest } = resolutionOf(blocks);
  return {
    model,
    blocks: namesOf(blocks),
    counts,
    worst: worst && {
      blockId: String(worst.block.blockId),
      row: worst.entry.row,
      column: worst.entry.column,
      error: finiteOrNull(worst.entry.error),
      resolution: weakestResolution(worst.block),
      verdict: worst.entry.verdict,
    },
    motion: motionOf(blocks),
    checkedShare: checkedShare(counts) ?? 0,
    resolution: weakest,
    resolvedShare: resolvedShare ?? 0,
  };
}

/** Each Jacobian once; probes are told of with it, and stand for it where the build has them alone. */
function namesOf(blocks: readonly LoadedBlock[]): ModelRow["blocks"] {
  const named = new Map<string, LoadedBlock>();
  for (const block of blocks) {
    const key = jacobianKey(block);
    if (block.probe === "" || !named.has(key)) named.set(key, block);
  }
  return [...named.values()].map(({ blockId, output, input, point }) => ({
    blockId: String(blockId),
    output,
    input,
    point,
  }));
}

/** Sum over the blocks that have a baseline; null where none has. */
function motionOf(blocks: readonly LoadedBlock[]): ModelRow["motion"] {
  const known = blocks.flatMap(({ motionCounts }) =>
    motionCounts === null ? [] : [presentMotion(JSON.parse(motionCounts) as MotionCounts)],
  );
  if (known.length === 0) return null;
  const sum = (name: keyof MotionCounts) => known.reduce((total, counts) => total + counts[name], 0);
  return {
    still: sum("still"),
    together: sum("together"),
    "derivative-only": sum("derivative-only"),
    "model-only": sum("model-only"),
    apart: sum("apart"),
  };
}
