import type { Reader } from "../../server/db/reader.ts";
import { unpackEntries } from "../../server/record/entryList.ts";

interface BreakRow {
  readonly id: number;
  readonly lane: string;
  readonly onset: string;
  readonly trace: string;
  readonly models: string;
  readonly worst: string;
  readonly [column: string]: unknown;
}

/**
 * What a project's record says, without what only tells when it was written: ids, numbers and times of arrival. Two
 * records are the same if these are equal.
 */
export async function recordOf(reader: Reader, projectId: number) {
  const builds = await reader.select(
    `SELECT l.name AS lane, c.sha, b.runId, b.state, b.missingShards, json_remove(b.summary, '$.worst.blockId') AS summary,
       w.model AS worstModel, p.runId AS baselineRun, pc.sha AS baseline
     FROM builds b JOIN lanes l ON l.id = b.laneId JOIN commits c ON c.id = b.commitId
     LEFT JOIN blocks w ON w.id = b.summary ->> '$.worst.blockId' LEFT JOIN builds p ON p.id = b.baselineBuildId LEFT JOIN commits pc ON pc.id = p.commitId
     WHERE b.projectId = $1 ORDER BY lane, c.sha, b.runId`,
    [projectId],
  );
  const motions = await reader.select(
    `SELECT b.runId, k.model, hex(s.hash) AS snapshot, m.counts, hex(m.hash) AS motion, hex(v.hash) AS coverage, v.counts AS covered
     FROM build_blocks bb JOIN builds b ON b.id = bb.buildId JOIN blocks k ON k.id = bb.blockId
     JOIN snapshots s ON s.id = bb.snapshotId LEFT JOIN motions m ON m.id = bb.motionId
     LEFT JOIN coverages v ON v.id = bb.coverageId
     WHERE b.projectId = $1 ORDER BY b.runId, k.model, k.point`,
    [projectId],
  );
  const commits = await reader.select(
    `SELECT c.sha, c.subject, c.authorName, c.committedAt, c.changedPaths,
       (SELECT json_group_array(parentSha ORDER BY position) FROM commit_parents p WHERE p.commitId = c.id) AS parents,
       (SELECT json_group_array(branch ORDER BY branch) FROM commit_branches b WHERE b.commitId = c.id) AS branches
     FROM commits c WHERE c.projectId = $1 ORDER BY c.sha`,
    [projectId],
  );
  return { builds, motions, commits, breaks: await breaksOf(reader, projectId) };
}

async function breaksOf(reader: Reader, projectId: number) {
  const rows = await reader.select<BreakRow>(
    `SELECT b.id, l.name AS lane, b.state, b.kind, b.onset, o.runId AS onsetRun, b.lastGood, g.runId AS lastGoodRun,
       b.repairedBy, r.runId AS repairedRun, b.trace, b.models, b.entryCount, b.worst, b.motion
     FROM breaks b JOIN lanes l ON l.id = b.laneId JOIN builds o ON o.id = b.onsetBuildId
     LEFT JOIN builds g ON g.id = b.lastGoodBuildId LEFT JOIN builds r ON r.id = b.repairedByBuildId
     WHERE b.projectId = $1 AND b.withdrawnAt IS NULL`,
    [projectId],
  );
  const breaks = await Promise.all(
    rows.map(async ({ id, trace, models, worst, ...row }) => {
      const parts = await reader.select<{ model: string; columns: number; entries: Buffer }>(
        `SELECT k.model, e.columnCount AS columns, e.entries FROM break_entries e JOIN blocks k ON k.id = e.blockId
         WHERE e.breakId = $1 ORDER BY k.model, k.point, columns`,
        [id],
      );
      const { blockId: _, ...worstEntry } = JSON.parse(worst) as { blockId: number };
      return {
        ...row,
        trace: JSON.parse(trace) as unknown,
        models: JSON.parse(models) as unknown,
        worst: worstEntry,
        parts: parts.map(({ model, columns, entries }) => ({ model, columns, entries: [...unpackEntries(entries)] })),
      };
    }),
  );
  const key = (one: (typeof breaks)[number]) => JSON.stringify([one.lane, one.onset, one.trace, one.parts]);
  return breaks.sort((a, b) => (key(a) < key(b) ? -1 : 1));
}
