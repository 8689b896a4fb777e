import type { GateRise } from "../../../shared/history/types.ts";
import type { Reader } from "../../db/reader.ts";
import { loadClimbsAt } from "../climbs/loadClimbs.ts";
import type { GateBlockRow } from "./loadGate.ts";

/** Climbs and jumps that were told after the base, up to the commit; drift runs along the default branch alone. */
export async function loadGateRises(
  reader: Reader,
  place: { readonly projectId: number; readonly laneId: number; readonly commit: string },
  base: string | null,
  head: readonly GateBlockRow[],
): Promise<GateRise[]> {
  const told = await reader.select("SELECT 1 FROM drift_events WHERE laneId = $1 LIMIT 1", [place.laneId]);
  if (told.length === 0) return [];
  const { groups, chain, project } = await loadClimbsAt(reader, place.projectId, place.laneId, place.commit);
  const known = base !== null && project.graph.has(base) ? project.graph.ancestors(base) : new Set<string>();
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
