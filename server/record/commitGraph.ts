import { groupBy } from "../../shared/domain/groupBy.ts";
import { CommitGraph } from "../../shared/history/commitGraph.ts";
import type { Reader } from "../db/reader.ts";

/** A project's commits as a graph, with what the default branch contains. */
export interface ProjectGraph {
  readonly graph: CommitGraph;
  /** Newest commit told of each branch. */
  readonly tips: ReadonlyMap<string, string>;
  /** Newest commit told of the default branch, or null before any was. */
  readonly defaultTip: string | null;
  /** Commits of the default branch: ancestors-or-self of any commit told of it. */
  readonly mainline: ReadonlySet<string>;
}

/** Graphs kept at hand, by version: versions are random, so that a rolled back one is never met again. */
const kept = new Map<string, ProjectGraph>();
const KEPT_GRAPHS = 16;

/** Reads the graph of a project, or takes the kept one if no commit was told since. */
export async function loadGraph(reader: Reader, projectId: number): Promise<ProjectGraph> {
  const [project] = await reader.select<{ defaultBranch: string; graphVersion: string }>(
    "SELECT defaultBranch, graphVersion FROM projects WHERE id = $1",
    [projectId],
  );
  const key = `${projectId} ${project.graphVersion} ${project.defaultBranch}`;
  const known = kept.get(key);
  if (known) return known;
  const built = await readGraph(reader, projectId, project.defaultBranch);
  kept.set(key, built);
  if (kept.size > KEPT_GRAPHS) kept.delete(kept.keys().next().value as string);
  return built;
}

async function readGraph(reader: Reader, projectId: number, defaultBranch: string): Promise<ProjectGraph> {
  const commits = await reader.select<{ id: number; sha: string; committedAt: number | null }>(
    "SELECT id, sha, committedAt FROM commits WHERE projectId = $1",
    [projectId],
  );
  const parents = await reader.select<{ commitId: number; parentSha: string }>(
    `SELECT p.commitId, p.parentSha FROM commit_parents p JOIN commits c ON c.id = p.commitId
     WHERE c.projectId = $1 ORDER BY p.commitId, p.position`,
    [projectId],
  );
  const branches = await reader.select<{ sha: string; branch: string }>(
    "SELECT c.sha, b.branch FROM commit_branches b JOIN commits c ON c.id = b.commitId WHERE c.projectId = $1",
    [projectId],
  );
  const edgesOf = groupBy(parents, (edge) => edge.commitId);
  const graph = CommitGraph.from(
    commits.map(({ id, sha, committedAt }) => ({
      sha,
      committedAt,
      parents: edgesOf.get(id)?.map((edge) => edge.parentSha) ?? [],
    })),
  );
  return { graph, ...branchesOf(graph, branches, defaultBranch) };
}

function branchesOf(
  graph: CommitGraph,
  rows: readonly { sha: string; branch: string }[],
  defaultBranch: string,
): Omit<ProjectGraph, "graph"> {
  const places = new Map(
    [...groupBy(rows, (row) => row.branch)].map(([branch, list]) => [
      branch,
      list.map(({ sha }) => graph.placeOf(sha)),
    ]),
  );
  const tips = new Map([...places].map(([branch, list]) => [branch, graph.shaAt(newest(list))]));
  const marks = graph.ancestorMarks(places.get(defaultBranch) ?? []);
  const mainline = new Set<string>();
  marks.forEach((mark, place) => {
    if (mark) mainline.add(graph.shaAt(place));
  });
  return { tips, mainline, defaultTip: tips.get(defaultBranch) ?? null };
}

const newest = (places: readonly number[]) => places.reduce((a, b) => Math.max(a, b), -1);
