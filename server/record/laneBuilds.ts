import type { Reader } from "../db/reader.ts";

/** A complete build of a lane. */
export interface LaneBuild {
  readonly id: number;
  readonly sha: string;
  readonly baselineBuildId: number | null;
}

export interface LaneBuilds {
  readonly all: readonly LaneBuild[];
  /** By sha: the build that speaks for its commit. */
  readonly speaking: ReadonlyMap<string, LaneBuild>;
}

/**
 * When a build was made, by its own account or by its arrival, as SQL over the table of that alias. Of several runs of
 * one commit and lane the last one by this speaks for the commit.
 */
export const madeAt = (build: string) => `COALESCE(${build}.finishedAt, ${build}.startedAt, ${build}.completedAt)`;

/** SQL that is true where the build of that alias speaks for its commit and lane. */
export const speaks = (build: string) =>
  `${build}.id = (SELECT o.id FROM builds o WHERE o.laneId = ${build}.laneId AND o.commitId = ${build}.commitId
     AND o.state = 'complete' ORDER BY ${madeAt("o")} DESC, o.id DESC LIMIT 1)`;

/**
 * The complete builds of a lane, and for each commit the one that speaks for it: of several runs the one that finished
 * last by its own account (or came last), so that the order of arrival does not decide.
 */
export async function loadLaneBuilds(reader: Reader, laneId: number): Promise<LaneBuilds> {
  const all = await reader.select<LaneBuild>(
    `SELECT b.id, c.sha, b.baselineBuildId FROM builds b JOIN commits c ON c.id = b.commitId
     WHERE b.laneId = $1 AND b.state = 'complete'
     ORDER BY ${madeAt("b")}, b.id`,
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
