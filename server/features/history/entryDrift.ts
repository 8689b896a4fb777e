import type { BlockName } from "../../../shared/domain/selector.ts";
import { driftSeries } from "../../../shared/numerics/drift/driftSeries.ts";
import type { DriftItem, DriftPoint } from "../../../shared/numerics/drift/types.ts";
import { restartsEntry } from "../../trace/driftRestarts.ts";
import type { Restarts } from "../../trace/driftRestarts.ts";

/** One build of the chain that holds the entry. */
export interface DriftBuild {
  readonly buildId: number;
  /** An index names an entry only together with the number of columns. */
  readonly columns: number;
  readonly numbers: DriftItem;
}

/** Drift of one entry by build, as the running state of its block has it. */
export function entryDrift(
  chain: readonly DriftBuild[],
  block: BlockName & { readonly lane: string },
  row: number,
  column: number,
  restarts: Restarts,
): Map<number, DriftPoint> {
  const points = new Map<number, DriftPoint>();
  for (const shape of new Set(chain.map((build) => build.columns))) {
    const builds = chain.filter((build) => build.columns === shape);
    const begins = new Set(
      [...builds.keys()].filter((at) => restartsEntry(restarts, builds[at].buildId, block, row, column)),
    );
    const series = driftSeries(
      builds.map((build) => build.numbers),
      begins,
    );
    series.forEach((point, at) => {
      if (point !== null) points.set(builds[at].buildId, point);
    });
  }
  return points;
}
