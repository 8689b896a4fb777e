import type { Reader } from "../db/reader.ts";

/** A complete build of a lane. */
export interface LaneBuild {
  readonly id: number;
  readonly sha: string;
  readonly baselineBuildId: number | null;
}

/**
 * The complete builds of a lane, and for each commit the one that speaks for it: of several runs the one that finished
 * last by its own account (or came last), so that the order of arrival does not decide.
 */
export async function loadLaneBuilds(
  reader: Reader,
  laneId: number,
): Promise<{ all: LaneBuild[]; speaking: Map<string, LaneBuild> }> {
  const all = await reader.select<LaneBuild>(
    `SELECT b.id, c.sha, b.baselineBuildId FROM builds b JOIN commits c ON c.id = b.commitId
     WHERE b.laneId = $1 AND b.state = 'complete'
     ORDER BY COALESCE(b.finishedAt, b.startedAt, b.completedAt), b.id`,
    [laneId],
  );
  return { all, speaking: new Map(all.map((build) => [build.sha, build])) };
}

/** The lane's id, or null where nothing was posted to it. */
export async function findLane(reader: Reader, projectId: number, name: string): Promise<number | null> {
  const [lane] = await reader.select<{ id: number }>("SELECT id FROM lanes WHERE projectId = $1 AND name = $2", [
    projectId,
    name,
  ]);
  return lane?.id ?? null;
}
