import { groupClimbs } from "../../../shared/history/groupClimbs.ts";
import type { ClimbGroup } from "../../../shared/history/groupClimbs.ts";
import type { Reader } from "../../db/reader.ts";
import type { ProjectGraph } from "../../record/commitGraph.ts";
import type { LaneBuild, LaneBuilds } from "../../record/laneBuilds.ts";
import { driftChain } from "../../trace/driftChain.ts";
import { loadRises } from "./loadRises.ts";

/** A lane with what is known of its commits and builds. */
export interface ClimbLane {
  readonly projectId: number;
  readonly laneId: number;
  readonly project: ProjectGraph;
  readonly builds: Pick<LaneBuilds, "speaking">;
}

export interface ClimbsAt {
  readonly groups: readonly ClimbGroup[];
  readonly chain: readonly LaneBuild[];
  /** Place in the chain that is spoken of, -1 where there is none. */
  readonly until: number;
}

/**
 * What drift told in a lane, as seen from a commit: what was known with the last build of the default branch that the
 * commit contains; null for the newest. Most lanes were told nothing: then the chain is not even laid out.
 */
export async function loadClimbsAt(reader: Reader, lane: ClimbLane, at: string | null): Promise<ClimbsAt> {
  const { laneId, project, builds } = lane;
  const told = await reader.select("SELECT 1 FROM drift_events WHERE laneId = $1 LIMIT 1", [laneId]);
  if (told.length === 0) return { groups: [], chain: [], until: -1 };
  const chain = driftChain(project, builds);
  const seen = at === null || !project.graph.has(at) ? null : project.graph.ancestors(at);
  const until = chain.findLastIndex((build) => seen === null || seen.has(build.sha));
  const placeOf = new Map(chain.map((build, place) => [build.id, place]));
  return { groups: groupClimbs(await loadRises(reader, laneId, placeOf), until), chain, until };
}
