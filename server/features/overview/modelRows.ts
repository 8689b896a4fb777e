import type { MotionCounts } from "../../../shared/numerics/types.ts";
import type { ModelRow } from "../../../shared/schemas/project.ts";
import type { StoredWorst } from "../../ingest/judgePosting.ts";
import { checkedShare, isWorse } from "../../record/buildSummary.ts";
import type { LoadedBlock } from "../blocks/loadBlockRows.ts";
import { presentBlockRow, presentMotion } from "../blocks/present.ts";
import { finiteOrNull } from "../history/loadStrip.ts";

/** Blocks of one build, gathered by model; the models with the worst entry first. */
export function modelRows(blocks: readonly LoadedBlock[]): ModelRow[] {
  const byModel = new Map<string, LoadedBlock[]>();
  for (const block of blocks) byModel.set(block.model, [...(byModel.get(block.model) ?? []), block]);
  const rows = [...byModel].map(([model, members]) => ({ row: modelRow(model, members), worst: worstOf(members) }));
  rows.sort((a, b) => {
    if (a.worst && b.worst && isWorse(a.worst.entry, b.worst.entry)) return -1;
    if (a.worst && b.worst && isWorse(b.worst.entry, a.worst.entry)) return 1;
    return a.row.model < b.row.model ? -1 : 1;
  });
  return rows.map(({ row }) => row);
}

function modelRow(model: string, blocks: readonly LoadedBlock[]): ModelRow {
  const sum = (name: "agrees" | "disagrees" | "unresolved" | "unreferenced" | "invalid") =>
    blocks.reduce((total, block) => total + block[name], 0);
  const counts = {
    blocks: blocks.length,
    entries: blocks.reduce((total, block) => total + block.rowCount * block.columnCount, 0),
    agrees: sum("agrees"),
    disagrees: sum("disagrees"),
    unresolved: sum("unresolved"),
    unreferenced: sum("unreferenced"),
    invalid: sum("invalid"),
  };
  const worst = worstOf(blocks);
  return {
    model,
    blocks: blocks.map(({ blockId, output, input, point }) => ({ blockId: String(blockId), output, input, point })),
    counts,
    worst: worst && {
      blockId: String(worst.block.blockId),
      row: worst.entry.row,
      column: worst.entry.column,
      error: finiteOrNull(worst.entry.error),
      resolution: finiteOrNull(presentBlockRow(worst.block).resolution),
      verdict: worst.entry.verdict,
    },
    motion: motionOf(blocks),
    checkedShare: checkedShare(counts) ?? 0,
  };
}

function worstOf(blocks: readonly LoadedBlock[]): { block: LoadedBlock; entry: StoredWorst } | null {
  let worst: { block: LoadedBlock; entry: StoredWorst } | null = null;
  for (const block of blocks) {
    if (block.worst === null) continue;
    const entry = JSON.parse(block.worst) as StoredWorst;
    if (worst === null || isWorse(entry, worst.entry)) worst = { block, entry };
  }
  return worst;
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
