import { selects, selectsEntry } from "../../shared/domain/selector.ts";
import type { BlockName, Selector } from "../../shared/domain/selector.ts";
import { commitOrder } from "../../shared/history/commitOrder.ts";
import type { Reader } from "../db/reader.ts";
import type { ProjectGraph } from "../record/commitGraph.ts";
import type { LaneBuild } from "../record/laneBuilds.ts";

/** Accepted baselines by the build that they begin with. */
export type Restarts = ReadonlyMap<number, readonly Selector[]>;

/** The first build of the chain at or after the commit of each accepted baseline. */
export async function loadRestarts(
  reader: Reader,
  projectId: number,
  { graph, defaultTip }: ProjectGraph,
  chain: readonly LaneBuild[],
): Promise<Restarts> {
  const accepted = await reader.select<{ sha: string; selector: string }>(
    "SELECT sha, selector FROM baselines WHERE projectId = $1 ORDER BY id",
    [projectId],
  );
  const restarts = new Map<number, Selector[]>();
  if (accepted.length === 0 || defaultTip === null) return restarts;
  const place = new Map(commitOrder(graph, [defaultTip]).map((sha, at) => [sha, at]));
  for (const { sha, selector } of accepted) {
    const from = place.get(sha) ?? Infinity;
    const first = chain.find((build) => (place.get(build.sha) ?? -1) >= from);
    if (first === undefined) continue;
    restarts.set(first.id, [...(restarts.get(first.id) ?? []), JSON.parse(selector) as Selector]);
  }
  return restarts;
}

/** Which entries of a block begin a new baseline with a build; null for none. */
export function restartOf(
  restarts: Restarts,
  buildId: number,
  block: BlockName & { readonly lane: string },
  shape: { readonly rows: number; readonly columns: number },
): Uint32Array | "all" | null {
  const selectors = (restarts.get(buildId) ?? []).filter((selector) => selects(selector, block, block.lane));
  if (selectors.length === 0) return null;
  if (selectors.some(({ rows, columns }) => rows === undefined && columns === undefined)) return "all";
  const entries: number[] = [];
  for (let entry = 0; entry < shape.rows * shape.columns; entry += 1) {
    const row = Math.floor(entry / shape.columns);
    if (selectors.some((selector) => selectsEntry(selector, row, entry % shape.columns))) entries.push(entry);
  }
  return Uint32Array.from(entries);
}

/** The same for one entry. */
export function restartsEntry(
  restarts: Restarts,
  buildId: number,
  block: BlockName & { readonly lane: string },
  row: number,
  column: number,
): boolean {
  return (restarts.get(buildId) ?? []).some(
    (selector) => selects(selector, block, block.lane) && selectsEntry(selector, row, column),
  );
}
