import type { EntryParts } from "./entryParts.ts";
import { newEntryParts } from "./entryParts.ts";
import type { Pool } from "./pool.ts";
import { newPool } from "./pool.ts";

/** What is gathered of a column before it is pooled; used again for every column. */
export interface ColumnScratch {
  readonly parts: EntryParts;
  /** By step of the column, largest first. */
  readonly truncation: readonly Pool[];
  readonly rounding: readonly Pool[];
  readonly uncertainty: readonly Pool[];
  readonly chosen: Uint32Array;
  /** Place of each posted step in the column. */
  readonly place: Uint8Array;
  /** Of the entries that are not quiet, in the order of the rows: S, S of a complex step, N, |r|, max(|r|, floor). */
  readonly curvature: Float64Array;
  readonly complexCurvature: Float64Array;
  readonly noise: Float64Array;
  readonly magnitude: Float64Array;
  readonly size: Float64Array;
  readonly spare: Pool;
}

export function newColumnScratch(rows: number, steps: number): ColumnScratch {
  const pools = () => Array.from({ length: steps }, () => newPool(rows));
  return {
    parts: newEntryParts(steps),
    truncation: pools(),
    rounding: pools(),
    uncertainty: pools(),
    chosen: new Uint32Array(steps),
    place: new Uint8Array(steps),
    curvature: new Float64Array(rows),
    complexCurvature: new Float64Array(rows),
    noise: new Float64Array(rows),
    magnitude: new Float64Array(rows),
    size: new Float64Array(rows),
    spare: newPool(rows),
  };
}

export function clearScratch(scratch: ColumnScratch): void {
  for (const pools of [scratch.truncation, scratch.rounding, scratch.uncertainty]) {
    for (const pool of pools) pool.count = 0;
  }
  scratch.chosen.fill(0);
}
