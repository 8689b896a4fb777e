import type { ClimbRow } from "../../../shared/schemas/climb.ts";
import type { LaneBuild } from "../../record/laneBuilds.ts";
import { presentSuspects } from "../breaks/present.ts";
import { climbSentence } from "./sentence.ts";
import type { TracedClimb } from "./traceClimb.ts";

const commitBuild = ({ sha, id }: LaneBuild) => ({ commit: sha, buildId: String(id) });
const commitBuildOrNull = (build: LaneBuild | null) => build && commitBuild(build);

/** `until`: place in the chain that is spoken of. */
export function presentClimb(
  climb: TracedClimb,
  place: { readonly lane: string; readonly until: number; readonly commitUrl: string | null },
): ClimbRow {
  const { group, block, row, column, commits, traced } = climb;
  const open = group.kind === "climb" && group.openCount > 0;
  const builds = (group.endedAt ?? place.until) - group.worst.onset + 1;
  const decades = open ? (climb.decades ?? group.worst.decades) : group.worst.decades;
  return {
    id: `${climb.toldBy.id}-${group.worst.blockId}-${group.worst.worstEntry}`,
    kind: group.kind,
    jumped: group.jumped,
    state: open ? "open" : "ended",
    lane: place.lane,
    model: group.model,
    onset: commitBuild(climb.onset),
    toldBy: commitBuild(climb.toldBy),
    lastCalm: commitBuildOrNull(climb.lastCalm),
    endedBy: commitBuildOrNull(climb.endedBy),
    entryCount: group.entryCount,
    openCount: group.openCount,
    builds,
    worst: {
      blockId: String(group.worst.blockId),
      output: block.output,
      input: block.input,
      point: block.point,
      row,
      column,
      decades: climb.decades,
    },
    sentence: climbSentence({
      kind: group.kind,
      open,
      jumped: group.jumped,
      beyond: climb.beyond,
      model: group.model,
      partials: group.entryCount - group.probes.length,
      probes: group.probes,
      decades,
      builds,
    }),
    suspectCount: traced.suspects.length,
    suspects: presentSuspects(traced.suspects, commits, place.commitUrl),
    nextTest: traced.nextTest && { commit: traced.nextTest.commit, remainingAfter: traced.nextTest.remainingAfter },
  };
}
