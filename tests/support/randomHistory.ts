import type { CommitNode, Test } from "../../shared/history/types.ts";
import { integerBetween } from "./random.ts";

/** An invented history with one mistake in it; `truth` is what a build of each commit would say. */
export interface RandomHistory {
  readonly nodes: readonly CommitNode[];
  readonly guilty: string;
  /** The commit that mends it, or null where none does. */
  readonly fix: string | null;
  readonly truth: ReadonlyMap<string, Test>;
}

export interface RandomHistoryOptions {
  readonly commits: number;
  /** Chance that a commit forks a new line, and that it merges another line. */
  readonly fork: number;
  readonly merge: number;
  /** Chance that a commit after the guilty one mends it. */
  readonly fix: number;
}

/** Grows a history commit by commit: most go on with a line, some fork one, some merge one into another. */
export function randomHistory(random: () => number, options: RandomHistoryOptions): RandomHistory {
  const nodes: CommitNode[] = [];
  const tips: string[] = [];
  for (let index = 0; index < options.commits; index++) {
    // Hex digits that do not sort like the history, so that nothing rests on the order of names.
    const sha = (Math.imul(index + 1, 0x9e3779b1) >>> 0).toString(16).padStart(8, "0").repeat(5);
    const line = integerBetween(random, 0, Math.max(0, tips.length - 1));
    const parents = tips.length === 0 ? [] : [tips[line]!];
    if (tips.length > 1 && random() < options.merge) {
      const other = (line + integerBetween(random, 1, tips.length - 1)) % tips.length;
      parents.push(tips[other]!);
      if (random() < 0.7) tips.splice(other, 1);
    } else if (index > 0 && random() < options.fork) {
      tips.push(nodes[integerBetween(random, Math.max(0, index - 12), index - 1)]!.sha);
    }
    const at = tips.indexOf(parents[0] ?? "");
    tips[at < 0 ? tips.length : at] = sha;
    // Clocks of different machines: not always rising.
    nodes.push({
      sha,
      parents,
      committedAt: random() < 0.1 ? null : index * 60_000 + integerBetween(random, -90_000, 90_000),
    });
  }
  return withMistake(random, nodes, options.fix);
}

function withMistake(random: () => number, nodes: readonly CommitNode[], fixChance: number): RandomHistory {
  const guilty = nodes[integerBetween(random, 0, nodes.length - 1)]!.sha;
  const after = reachedFrom(nodes, guilty);
  const candidates = [...after].filter((sha) => sha !== guilty);
  const mends = candidates.length > 0 && random() < fixChance;
  const fix = mends ? candidates[integerBetween(random, 0, candidates.length - 1)]! : null;
  const mended = fix === null ? new Set<string>() : reachedFrom(nodes, fix);
  const isBad = (sha: string) => after.has(sha) && !mended.has(sha);
  return { nodes, guilty, fix, truth: new Map(nodes.map(({ sha }) => [sha, isBad(sha) ? "bad" : "good"])) };
}

/** A commit and its descendants, worked out from the parents alone: nodes come parents first. */
function reachedFrom(nodes: readonly CommitNode[], sha: string): Set<string> {
  const reached = new Set([sha]);
  for (const node of nodes) if (node.parents.some((parent) => reached.has(parent))) reached.add(node.sha);
  return reached;
}
