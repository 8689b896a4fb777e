import { commitOrder } from "../../shared/history/commitOrder.ts";
import type { ProjectGraph } from "../record/commitGraph.ts";
import type { LaneBuild, LaneBuilds } from "../record/laneBuilds.ts";

/** The builds that drift is followed through: those that speak for a commit of the default branch, in commit order. */
export function driftChain(
  { graph, defaultTip }: ProjectGraph,
  { speaking }: Pick<LaneBuilds, "speaking">,
): LaneBuild[] {
  if (defaultTip === null) return [];
  return commitOrder(graph, [defaultTip]).flatMap((sha) => speaking.get(sha) ?? []);
}

export interface ChainChange {
  /** Builds that came at the end, in order. */
  readonly appended: readonly number[];
  /** Builds that came, went or moved elsewhere: what their blocks told has to be told anew. */
  readonly disturbed: readonly number[];
}

/** How a chain of build ids became another one. */
export function chainChange(before: readonly number[], now: readonly number[]): ChainChange {
  let same = 0;
  while (same < before.length && same < now.length && before[same] === now[same]) same += 1;
  if (same === before.length) return { appended: now.slice(same), disturbed: [] };
  let tail = 0;
  const room = Math.min(before.length, now.length) - same;
  while (tail < room && before[before.length - 1 - tail] === now[now.length - 1 - tail]) tail += 1;
  const between = [...before.slice(same, before.length - tail), ...now.slice(same, now.length - tail)];
  return { appended: [], disturbed: [...new Set(between)] };
}
