import type { ProjectRow } from "../../../shared/schemas/project.ts";
import type { Context } from "../../context.ts";
import type { Reader } from "../../db/reader.ts";
import { timeOrNull } from "../../http/present.ts";
import { readSummary, worstVerdict } from "../../record/buildSummary.ts";
import { speaks } from "../../record/laneBuilds.ts";
import { loadUnwaived } from "../breaks/loadUnwaived.ts";
import { finiteOrNull } from "../history/loadStrip.ts";
import { loadSilentLanes } from "../overview/silentLanes.ts";

export type Trouble = Pick<ProjectRow, "openBreaks" | "silentLanes" | "lastBuildAt" | "trace">;

const TRACE_LENGTH = 60;

/** Where there is trouble, for each of the projects. */
export async function troubleOf(
  { db }: Context,
  projectIds: readonly number[],
  now = Date.now(),
): Promise<ReadonlyMap<number, Trouble>> {
  const ids = JSON.stringify(projectIds);
  const last = await db.select<{ projectId: number; at: number }>(
    `SELECT projectId, max(createdAt) AS at FROM builds
     WHERE projectId IN (SELECT value FROM json_each($1)) GROUP BY projectId`,
    [ids],
  );
  const silent = await loadSilentLanes(db, projectIds, now);
  const lastOf = new Map(last.map(({ projectId, at }) => [projectId, at]));
  const troubles = new Map<number, Trouble>();
  for (const id of projectIds) {
    troubles.set(id, {
      openBreaks: (await loadUnwaived(db, id, null, now)).length,
      silentLanes: silent.filter((lane) => lane.projectId === id).map(({ lane }) => lane),
      lastBuildAt: timeOrNull(lastOf.get(id) ?? null),
      trace: await loadTrace(db, id),
    });
  }
  return troubles;
}

/** The last commits built in the lane with most builds, oldest first. */
async function loadTrace(reader: Reader, projectId: number): Promise<Trouble["trace"]> {
  const rows = await reader.select<{ sha: string; summary: string }>(
    `SELECT c.sha, b.summary FROM builds b JOIN commits c ON c.id = b.commitId
     WHERE ${speaks("b")} AND b.laneId =
       (SELECT laneId FROM builds WHERE projectId = $1 GROUP BY laneId ORDER BY count(*) DESC, laneId LIMIT 1)
     ORDER BY COALESCE(c.committedAt, b.createdAt) DESC, b.id DESC LIMIT $2`,
    [projectId, TRACE_LENGTH],
  );
  return rows.reverse().map(({ sha, summary }) => {
    const { worst, counts } = readSummary(summary);
    return { commit: sha, worstError: finiteOrNull(worst?.error ?? null), verdict: worstVerdict(counts) };
  });
}
