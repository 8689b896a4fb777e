import type { Overview } from "../../../shared/schemas/project.ts";
import type { ResolutionBins } from "../../ingest/resolutionBins.ts";
import type { LoadedBlock } from "../blocks/loadBlockRows.ts";
import { weakestResolution } from "../blocks/present.ts";

type Resolving = Pick<LoadedBlock, "probe" | "resolutions" | "rtol" | "entries" | "agrees" | "disagrees">;

/** What the references of some blocks can see. */
export interface ResolutionFacts {
  /** Share of the entries whose references can tell at their block's rtol; null without entries. */
  readonly resolvedShare: number | null;
  /** Resolution of the weakest reference, upper end of its octave; null where none is finite. */
  readonly weakest: number | null;
}

/** Resolution of the Jacobians among `blocks`; probes resolve no entry of their own. */
export function resolutionOf(blocks: readonly Resolving[]): ResolutionFacts {
  const jacobians = blocks.filter(({ probe }) => probe === "");
  const entries = jacobians.reduce((sum, block) => sum + block.entries, 0);
  const resolved = jacobians.reduce((sum, block) => sum + resolvedEntries(block), 0);
  const known = jacobians.flatMap((block) => weakestResolution(block) ?? []);
  return {
    resolvedShare: entries === 0 ? null : resolved / entries,
    weakest: known.length === 0 ? null : known.reduce((a, b) => Math.max(a, b)),
  };
}

/** Entries in octaves up to rtol, or all that were decided where those are more (no change claimed and none seen). */
function resolvedEntries({ resolutions, rtol, agrees, disagrees }: Resolving): number {
  const bins = JSON.parse(resolutions) as ResolutionBins;
  const within = bins.reduce((sum, [exponent, count]) => (2 ** exponent <= rtol ? sum + count : sum), 0);
  return Math.max(within, agrees + disagrees);
}

export function presentResolution(blocks: readonly Resolving[], rtol: number): Overview["resolution"] {
  const { resolvedShare, weakest } = resolutionOf(blocks);
  return resolvedShare === null ? null : { resolvedShare, at: rtol, weakest };
}
