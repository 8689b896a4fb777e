import type { Overview } from "../../../shared/schemas/project.ts";
import { timeOrNull } from "../../http/present.ts";
import type { ProjectGraph } from "../../record/commitGraph.ts";
import type { StoredBreakWorst, StoredTrace } from "../../trace/storedTrace.ts";
import type { LoadedBreak } from "../breaks/loadBreaks.ts";
import { breakSentence, partsOf } from "../breaks/sentence.ts";

export interface BreakAt {
  readonly brief: Overview["openBreaks"][number];
  /** Entries of Jacobians, and names of the probes beside them. */
  readonly partials: number;
  readonly probes: readonly string[];
  readonly models: readonly string[];
}

/**
 * What the breaks of a lane are, seen from one commit: begun there, ended there, or open in its history. What waivers
 * cover as a whole is accepted, not open.
 */
export function breaksAt(
  { graph }: ProjectGraph,
  breaks: readonly LoadedBreak[],
  waived: { has(id: number): boolean },
  commit: string | null,
): { readonly open: BreakAt[]; readonly fresh: BreakAt[]; readonly repaired: BreakAt[] } {
  const known = commit !== null && graph.has(commit);
  const history = known ? graph.ancestors(commit) : new Set<string>();
  const seen = breaks.filter((found) => history.has(found.onset));
  const isOpen = (found: LoadedBreak) => found.repairedBy === null || !history.has(found.repairedBy);
  return {
    open: seen.filter((found) => isOpen(found) && !waived.has(found.id)).map(at),
    fresh: seen.filter((found) => found.onset === commit).map(at),
    repaired: seen.filter((found) => found.repairedBy === commit).map(at),
  };
}

function at(found: LoadedBreak): BreakAt {
  const models = JSON.parse(found.models) as string[];
  const worst = JSON.parse(found.worst) as StoredBreakWorst;
  return {
    brief: {
      id: String(found.id),
      number: found.number,
      sentence: breakSentence({ kind: found.kind, ...partsOf(found), models, invalid: worst.error === null }),
      onset: found.onset,
      suspectCount: (JSON.parse(found.trace) as StoredTrace).suspects.length,
      since: timeOrNull(found.onsetAt),
    },
    ...partsOf(found),
    models,
  };
}
