import { groupClimbs } from "../../../shared/history/groupClimbs.ts";
import type { ClimbGroup } from "../../../shared/history/groupClimbs.ts";
import type { Reader } from "../../db/reader.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import type { ProjectGraph } from "../../record/commitGraph.ts";
import { loadLaneBuilds } from "../../record/laneBuilds.ts";
import type { LaneBuild, LaneBuilds } from "../../record/laneBuilds.ts";
import { driftChain } from "../../trace/driftChain.ts";
import { loadRises } from "./loadRises.ts";

export interface ClimbsAt {
  readonly groups: readonly ClimbGroup[];
  readonly chain: readonly LaneBuild[];
  /** Place in the chain that is spoken of, -1 where there is none. */
  readonly until: number;
  readonly project: ProjectGraph;
  readonly builds: LaneBuilds;
}

/**
 * What drift told in a lane, as seen from a commit: what was known with the last build of the default branch that the
 * commit contains; null for the newest.
 */
export async function loadClimbsAt(
  reader: Reader,
  projectId: number,
  laneId: number,
  at: string | null,
): Promise<ClimbsAt> {
  const project = await loadGraph(reader, projectId);
  const builds = await loadLaneBuilds(reader, laneId);
  const chain = driftChain(project, builds);
  const seen = at === null || !project.graph.has(at) ? null : project.graph.ancestors(at);
  const until = chain.findLastIndex((build) => seen === null || seen.has(build.sha));
  const placeOf = new Map(chain.map((build, place) => [build.id, place]));
  const rises = await loadRises(reader, laneId, placeOf);
  return { groups: groupClimbs(rises, until), chain, until, project, builds };
}
