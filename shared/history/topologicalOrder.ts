import { CommitCycleError } from "./commitCycleError.ts";
import type { CommitNode } from "./types.ts";

/**
 * Shas with every parent before its children, oldest first. What the graph leaves open is ordered by `committedAt`
 * (a commit without one comes as early as its parents allow), then by sha, so that the order depends on the set of
 * nodes alone. Cost O(n log n), no recursion.
 * @throws CommitCycleError where the parents run in a circle.
 * Source: A. B. Kahn, Topological sorting of large networks, Comm. ACM 5(11):558-562, 1962, with a heap as the queue.
 */
export function topologicalOrder(nodes: ReadonlyMap<string, CommitNode>): string[] {
  const byTime = [...nodes.values()].sort(earlierFirst);
  const rankOf = new Map(byTime.map((node, rank) => [node.sha, rank]));
  const waitingFor = new Int32Array(byTime.length);
  const childrenOf: number[][] = byTime.map(() => []);
  byTime.forEach((node, rank) => {
    for (const parent of node.parents) {
      const parentRank = rankOf.get(parent);
      if (parentRank === undefined) continue;
      waitingFor[rank]! += 1;
      childrenOf[parentRank]!.push(rank);
    }
  });
  const ready = new SmallestFirst();
  waitingFor.forEach((count, rank) => {
    if (count === 0) ready.push(rank);
  });
  const order: string[] = [];
  for (let rank = ready.pop(); rank !== undefined; rank = ready.pop()) {
    order.push(byTime[rank]!.sha);
    for (const child of childrenOf[rank]!) {
      waitingFor[child]! -= 1;
      if (waitingFor[child] === 0) ready.push(child);
    }
  }
  if (order.length < byTime.length) throw new CommitCycleError(someCircle(nodes, byTime, waitingFor));
  return order;
}

function earlierFirst(a: CommitNode, b: CommitNode): number {
  const timeA = a.committedAt ?? -Infinity;
  const timeB = b.committedAt ?? -Infinity;
  if (timeA !== timeB) return timeA < timeB ? -1 : 1;
  return a.sha < b.sha ? -1 : 1;
}

/** Every commit left over waits for a parent that is left over too: following those must come round. */
function someCircle(nodes: ReadonlyMap<string, CommitNode>, byTime: readonly CommitNode[], waitingFor: Int32Array) {
  const stuck = new Set(byTime.filter((_, rank) => waitingFor[rank]! > 0).map((node) => node.sha));
  const seenAt = new Map<string, number>();
  const path: string[] = [];
  let sha = [...stuck][0]!;
  while (!seenAt.has(sha)) {
    seenAt.set(sha, path.length);
    path.push(sha);
    sha = nodes.get(sha)!.parents.find((parent) => stuck.has(parent))!;
  }
  return path.slice(seenAt.get(sha));
}

/** Binary min-heap of numbers. */
class SmallestFirst {
  private readonly items: number[] = [];

  push(value: number): void {
    let at = this.items.push(value) - 1;
    while (at > 0) {
      const above = (at - 1) >> 1;
      if (this.items[above]! <= value) break;
      this.items[at] = this.items[above]!;
      at = above;
    }
    this.items[at] = value;
  }

  pop(): number | undefined {
    const top = this.items[0];
    const last = this.items.pop();
    const size = this.items.length;
    if (last === undefined || size === 0) return top;
    let at = 0;
    for (let below = 1; below < size; below = 2 * at + 1) {
      if (below + 1 < size && this.items[below + 1]! < this.items[below]!) below += 1;
      if (this.items[below]! >= last) break;
      this.items[at] = this.items[below]!;
      at = below;
    }
    this.items[at] = last;
    return top;
  }
}
