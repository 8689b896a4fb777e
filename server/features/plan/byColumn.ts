import type { PlannedBlock } from "./loadChecks.ts";

/** By block, then by input column. */
export type ByColumn<T> = ReadonlyMap<number, ReadonlyMap<number, T>>;

/** Where a plan is made. */
export interface PlanPlace {
  readonly projectId: number;
  readonly laneId: number;
  readonly lane: string;
  readonly now: number;
}

/** Entries are named by their index only together with the number of columns. */
export const columnsOf = (blocks: readonly PlannedBlock[]): ReadonlyMap<number, number> =>
  new Map(blocks.map((block) => [block.blockId, block.columns]));
