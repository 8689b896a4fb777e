import type { CommitGraph } from "../../shared/history/commitGraph.ts";
import { nearestJudgedAncestor } from "../../shared/history/nearestJudgedAncestor.ts";
import type { Writer } from "../db/write.ts";
import type { LaneBuilds } from "../record/laneBuilds.ts";

/** A build whose motion has to be told anew. */
export interface Rebased {
  readonly buildId: number;
  readonly baselineBuildId: number | null;
}

/**
 * Finds for every build of the lane the build it is compared with, that of the nearest judged ancestor, and answers
 * with those where it is another one than before: a late build becomes the baseline of what came before it.
 */
export async function updateBaselines(
  w: Writer,
  { all, speaking }: LaneBuilds,
  graph: CommitGraph,
  arrivedBuildId: number | null,
): Promise<Rebased[]> {
  const rebased: Rebased[] = [];
  for (const build of all) {
    const ancestor = nearestJudgedAncestor(graph, build.sha, (sha) => speaking.has(sha));
    const baseline = ancestor === null ? null : (speaking.get(ancestor)?.id ?? null);
    if (baseline === build.baselineBuildId && build.id !== arrivedBuildId) continue;
    rebased.push({ buildId: build.id, baselineBuildId: baseline });
    await w.run("UPDATE builds SET baselineBuildId = $2 WHERE id = $1", [build.id, baseline]);
  }
  return rebased;
}
