import type { Reader } from "../../db/reader.ts";
import { speaks } from "../../record/laneBuilds.ts";

/** One row of a build with all that lists and its page show. */
export interface LoadedBuild {
  readonly id: number;
  readonly state: "receiving" | "complete";
  readonly lane: string;
  readonly sha: string;
  readonly branch: string | null;
  readonly subject: string | null;
  readonly authorName: string | null;
  readonly committedAt: number | null;
  readonly createdAt: number;
  readonly completedAt: number | null;
  readonly runId: string;
  readonly runUrl: string | null;
  readonly startedAt: number | null;
  readonly finishedAt: number | null;
  readonly shardCount: number;
  /** JSON: number[]. */
  readonly received: string;
  readonly missingShards: string;
  readonly baselineBuildId: number | null;
  readonly baselineSha: string | null;
  /** JSON: BuildSummary; null while receiving. */
  readonly summary: string | null;
  /** 1 where this build speaks for its commit and lane. */
  readonly current: 0 | 1;
}

const SELECT = `
  SELECT b.id, b.state, l.name AS lane, c.sha, c.subject, c.authorName, c.committedAt, b.createdAt, b.completedAt,
    b.runId, b.runUrl, b.startedAt, b.finishedAt, b.shardCount, b.missingShards, b.summary, b.baselineBuildId,
    (SELECT branch FROM commit_branches cb WHERE cb.commitId = c.id ORDER BY branch LIMIT 1) AS branch,
    (SELECT json_group_array(position ORDER BY position) FROM shards s WHERE s.buildId = b.id) AS received,
    (SELECT bc.sha FROM builds bb JOIN commits bc ON bc.id = bb.commitId WHERE bb.id = b.baselineBuildId) AS baselineSha,
    ${speaks("b")} AS current
  FROM builds b JOIN lanes l ON l.id = b.laneId JOIN commits c ON c.id = b.commitId`;

export interface BuildFilter {
  readonly lane?: string | undefined;
  readonly branch?: string | undefined;
  readonly commit?: string | undefined;
}

/** Builds of a project, newest first: `limit` of them after the build `after`. */
export function loadBuilds(
  reader: Reader,
  projectId: number,
  filter: BuildFilter,
  page: { readonly after: number | null; readonly limit: number },
): Promise<LoadedBuild[]> {
  return reader.select<LoadedBuild>(
    `${SELECT} WHERE b.projectId = $1 AND ($2 IS NULL OR l.name = $2) AND ($3 IS NULL OR c.sha = $3)
       AND ($4 IS NULL OR EXISTS (SELECT 1 FROM commit_branches cb WHERE cb.commitId = c.id AND cb.branch = $4))
       AND ($5 IS NULL OR b.id < $5) ORDER BY b.id DESC LIMIT $6`,
    [projectId, filter.lane ?? null, filter.commit ?? null, filter.branch ?? null, page.after, page.limit],
  );
}

export async function loadBuild(reader: Reader, projectId: number, buildId: number): Promise<LoadedBuild | null> {
  const [build] = await reader.select<LoadedBuild>(`${SELECT} WHERE b.projectId = $1 AND b.id = $2`, [
    projectId,
    buildId,
  ]);
  return build ?? null;
}

export interface LoadedArrival {
  readonly position: number;
  readonly receivedAt: number;
  readonly bytes: number;
}

export function loadArrivals(reader: Reader, buildId: number): Promise<LoadedArrival[]> {
  return reader.select<LoadedArrival>(
    "SELECT position, receivedAt, bytes FROM shards WHERE buildId = $1 ORDER BY position",
    [buildId],
  );
}
