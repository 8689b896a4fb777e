import { VERDICT_CODE } from "../../shared/domain/vocabulary.ts";
import type { BlockPlanes } from "./planes.ts";

/** The loudest first: invalid, disagrees, unresolved, unreferenced, agrees. */
const LOUDNESS = new Uint8Array(256);
LOUDNESS[VERDICT_CODE.invalid] = 4;
LOUDNESS[VERDICT_CODE.disagrees] = 3;
LOUDNESS[VERDICT_CODE.unresolved] = 2;
LOUDNESS[VERDICT_CODE.unreferenced] = 1;

export const ENTRY_ORDERS = ["worst first", "by row"] as const;
export type EntryOrder = (typeof ENTRY_ORDERS)[number];

/** Indices of a block's entries in the order wanted; ties stand in row-major order. */
export function orderEntries(planes: BlockPlanes, order: EntryOrder): Uint32Array {
  const indices = Uint32Array.from({ length: planes.rows * planes.columns }, (_, k) => k);
  if (order === "by row") return indices;
  const error = (k: number) => (Number.isNaN(planes.error[k]!) ? -1 : planes.error[k]!);
  return indices.sort((a, b) => {
    const louder = LOUDNESS[planes.verdict[b]!]! - LOUDNESS[planes.verdict[a]!]!;
    return louder !== 0 ? louder : error(b) - error(a) || a - b;
  });
}
