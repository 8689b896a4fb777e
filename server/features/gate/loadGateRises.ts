import type { GateRise } from "../../../shared/history/types.ts";
import type { Reader } from "../../db/reader.ts";
import { loadClimbsAt } from "../climbs/loadClimbs.ts";
import type { ClimbLane } from "../climbs/loadClimbs.ts";
import type { GateBlockRow } from "./loadGate.ts";

/** Climbs and jumps that were told after the base, up to the commit; drift runs along the default branch alone. */
export async function loadGateRises(
  reader: Reader,
  lane: ClimbLane,
  range: { readonly commit: string; readonly base: string | null },
  head: readonly GateBlockRow[],
): Promise<GateRise[]> {
  const { base } = range;
  const { graph } = lane.project;
  const { groups, chain } = await loadClimbsAt(reader, lane, range.commit);
  const known = base !== null && graph.has(base) ? graph.ancestors(base) : new Set<string>();
  const named = ({ block, probe }: GateBlockRow) => (probe ? `probe ${probe.name} of ${block}` : block);
  const names = new Map(head.map((block) => [block.blockId, named(block)]));
  return groups
    .filter(({ worst }) => !known.has(chain[worst.told].sha))
    .map(({ kind, model, worst, entryCount }) => ({
      kind,
      model,
      block: names.get(String(worst.blockId)) ?? "a block that is gone",
      row: Math.floor(worst.worstEntry / worst.columns),
      column: worst.worstEntry % worst.columns,
      entryCount,
      decades: worst.decades,
    }));
}
