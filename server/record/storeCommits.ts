import { randomUUID } from "node:crypto";
import { CommitCycleError } from "../../shared/history/commitCycleError.ts";
import type { CommitDocument } from "../../shared/schemas/commit.ts";
import type { Bindable, Writer } from "../db/write.ts";
import { loadGraph } from "./commitGraph.ts";
import { RecordConflict } from "./conflict.ts";

interface StoredCommit {
  readonly id: number;
  readonly sha: string;
  readonly parents: string | null;
}

/**
 * Adds what a posting tells of commits: new ones are added, what is left out of known ones stays as it is. A commit's
 * parents never change: where they were not told they are filled in, other ones are a conflict.
 * Answers with the number of commits that were new.
 * @throws RecordConflict for other parents than before, and for parents that run in a circle.
 */
export async function storeCommits(w: Writer, projectId: number, told: readonly CommitDocument[]): Promise<number> {
  const commits = merged(told);
  const before = await loadStored(w, projectId, [...commits.keys()]);
  await w.insertOrIgnore(
    "commits",
    ["projectId", "sha"],
    [...commits.keys()].filter((sha) => !before.has(sha)).map((sha) => [projectId, sha]),
    500,
  );
  const stored = await loadStored(w, projectId, [...commits.keys()]);
  const changedFacts = await fillFacts(w, projectId, commits);
  const edges = newEdges(commits, stored);
  await w.insertOrIgnore("commit_parents", ["commitId", "position", "parentSha"], edges, 500);
  const branches = await addBranches(w, commits, stored);
  if (before.size < stored.size || edges.length > 0 || branches > 0 || changedFacts) {
    await w.run("UPDATE projects SET graphVersion = $2 WHERE id = $1", [projectId, randomUUID()]);
    await refuseCircles(w, projectId);
  }
  return stored.size - before.size;
}

/** The same commit told twice in one posting is one; what is told later goes before. */
function merged(told: readonly CommitDocument[]): Map<string, CommitDocument> {
  const commits = new Map<string, CommitDocument>();
  for (const commit of told) commits.set(commit.sha, { ...commits.get(commit.sha), ...commit });
  return commits;
}

async function loadStored(w: Writer, projectId: number, shas: string[]): Promise<Map<string, StoredCommit>> {
  const rows = await w.select<StoredCommit>(
    `SELECT c.id, c.sha,
       (SELECT json_group_array(parentSha ORDER BY position) FROM commit_parents p WHERE p.commitId = c.id) AS parents
     FROM commits c WHERE c.projectId = $1 AND c.sha IN (SELECT value FROM json_each($2))`,
    [projectId, JSON.stringify(shas)],
  );
  return new Map(rows.map((row) => [row.sha, row]));
}

/** True where a date changed: dates order what the graph leaves open. */
async function fillFacts(w: Writer, projectId: number, commits: Map<string, CommitDocument>): Promise<boolean> {
  const facts = [...commits.values()].map((commit) => ({
    sha: commit.sha,
    subject: commit.subject ?? null,
    authorName: commit.author?.name ?? null,
    authorEmail: commit.author?.email ?? null,
    committedAt: commit.committedAt === undefined ? null : Date.parse(commit.committedAt),
    changedPaths: commit.changedPaths ? JSON.stringify(commit.changedPaths) : null,
  }));
  const names = ["subject", "authorName", "authorEmail", "committedAt", "changedPaths"] as const;
  const json = JSON.stringify(facts.filter((fact) => names.some((name) => fact[name] !== null)));
  const differs = names.map((name) => `(t.${name} IS NOT NULL AND t.${name} IS NOT c.${name})`).join(" OR ");
  const table = `(SELECT value ->> 'sha' AS sha, ${names
    .map((name) => `value ->> '${name}' AS ${name}`)
    .join(", ")} FROM json_each($2))`;
  const changed = await w.select<{ id: number; dated: number }>(
    `SELECT c.id, t.committedAt IS NOT NULL AND t.committedAt IS NOT c.committedAt AS dated
     FROM ${table} t JOIN commits c ON c.projectId = $1 AND c.sha = t.sha WHERE ${differs}`,
    [projectId, json],
  );
  if (changed.length === 0) return false;
  await w.run(
    `UPDATE commits SET ${names.map((name) => `${name} = COALESCE(t.${name}, commits.${name})`).join(", ")}
     FROM ${table} t WHERE commits.projectId = $1 AND commits.sha = t.sha
       AND commits.id IN (SELECT value FROM json_each($3))`,
    [projectId, json, JSON.stringify(changed.map((row) => row.id))],
  );
  return changed.some((row) => row.dated === 1);
}

function newEdges(commits: Map<string, CommitDocument>, stored: Map<string, StoredCommit>): Bindable[][] {
  const edges: Bindable[][] = [];
  for (const { sha, parents } of commits.values()) {
    const known = stored.get(sha) as StoredCommit;
    const before = JSON.parse(known.parents ?? "[]") as string[];
    if (parents === undefined || parents.length === 0) continue;
    if (before.length === 0) parents.forEach((parent, position) => edges.push([known.id, position, parent]));
    else if (before.join() !== parents.join()) {
      throw new RecordConflict("conflict", `Commit ${sha} was told before with other parents (${before.join(", ")}).`);
    }
  }
  return edges;
}

/** Number of commits whose branch was new. */
async function addBranches(
  w: Writer,
  commits: Map<string, CommitDocument>,
  stored: Map<string, StoredCommit>,
): Promise<number> {
  const rows = [...commits.values()].flatMap(({ sha, branch }): Bindable[][] =>
    branch === undefined ? [] : [[(stored.get(sha) as StoredCommit).id, branch]],
  );
  if (rows.length === 0) return 0;
  const ids = JSON.stringify(rows.map(([id]) => id));
  const count = async () => {
    const [row] = await w.select<{ n: number }>(
      "SELECT count(*) AS n FROM commit_branches WHERE commitId IN (SELECT value FROM json_each($1))",
      [ids],
    );
    return row.n;
  };
  const before = await count();
  await w.insertOrIgnore("commit_branches", ["commitId", "branch"], rows, 500);
  return (await count()) - before;
}

/** The graph is built again in any case by whoever traces next, and is then at hand. */
async function refuseCircles(w: Writer, projectId: number): Promise<void> {
  try {
    await loadGraph(w, projectId);
  } catch (error) {
    if (!(error instanceof CommitCycleError)) throw error;
    throw new RecordConflict("invalid", error.message, "#/commit/parents");
  }
}
