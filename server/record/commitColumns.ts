import { commitOrder } from "../../shared/history/commitOrder.ts";
import type { ProjectGraph } from "./commitGraph.ts";

/** All commits of a project in commit order, oldest first: the default branch's line, then what else is known. */
export function commitColumns({ graph, defaultTip, tips }: ProjectGraph): string[] {
  const heads = graph.topological().filter((sha) => graph.childrenAt(graph.placeOf(sha)).length === 0);
  const byPlace = (a: string, b: string) => graph.placeOf(a) - graph.placeOf(b);
  const others = [...new Set([...tips.values(), ...heads])].sort(byPlace);
  return commitOrder(graph, defaultTip === null ? others : [defaultTip, ...others]);
}
