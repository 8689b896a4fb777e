import type { Reader } from "../db/reader.ts";

/** What postings told of a commit beside its place in the graph. */
export interface CommitFacts {
  readonly sha: string;
  readonly subject: string | null;
  readonly author: string | null;
  readonly committedAt: number | null;
  readonly changedPaths: readonly string[] | null;
  readonly branch: string | null;
}

type Row = Omit<CommitFacts, "changedPaths"> & { readonly changedPaths: string | null };

/** Facts by sha; commits that are not known are not in the answer. */
export async function loadCommitFacts(
  reader: Reader,
  projectId: number,
  shas: readonly string[],
): Promise<Map<string, CommitFacts>> {
  const rows = await reader.select<Row>(
    `SELECT sha, subject, authorName AS author, committedAt, changedPaths,
       (SELECT branch FROM commit_branches b WHERE b.commitId = c.id ORDER BY branch LIMIT 1) AS branch
     FROM commits c WHERE projectId = $1 AND sha IN (SELECT value FROM json_each($2))`,
    [projectId, JSON.stringify(shas)],
  );
  return new Map(
    rows.map((row) => [
      row.sha,
      { ...row, changedPaths: row.changedPaths === null ? null : (JSON.parse(row.changedPaths) as string[]) },
    ]),
  );
}
