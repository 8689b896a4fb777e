import type { CommitNode } from "./types.ts";

/**
 * Makes one node of each sha. The same commit is told many times (as a build's commit, as history, from a shallow
 * clone without its parents), in any order, so that the result must not depend on which came first: the longest list
 * of parents wins, between equally long ones the smaller in code unit order, and the earliest known time.
 * Repeated parents of one commit are listed once.
 */
export function mergeNodes(nodes: Iterable<CommitNode>): Map<string, CommitNode> {
  const bySha = new Map<string, CommitNode>();
  for (const node of nodes) {
    const parents = [...new Set(node.parents)];
    const known = bySha.get(node.sha);
    bySha.set(node.sha, {
      sha: node.sha,
      parents: known ? fuller(known.parents, parents) : parents,
      committedAt: known ? earlier(known.committedAt, node.committedAt) : node.committedAt,
    });
  }
  return bySha;
}

function fuller(a: readonly string[], b: readonly string[]): readonly string[] {
  if (a.length !== b.length) return a.length > b.length ? a : b;
  return a.join(" ") <= b.join(" ") ? a : b;
}

function earlier(a: number | null, b: number | null): number | null {
  if (a === null || b === null) return a ?? b;
  return Math.min(a, b);
}
