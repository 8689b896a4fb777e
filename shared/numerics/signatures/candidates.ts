import { lowRank } from "./lowRank.ts";
import { columnsReordered, rowsReordered } from "./reordered.ts";
import { scaled } from "./scaled.ts";
import { signFlipped } from "./signFlipped.ts";
import { singlePrecision } from "./singlePrecision.ts";
import { spuriousTerm } from "./spuriousTerm.ts";
import { storageOrder } from "./storageOrder.ts";
import { transposed } from "./transposed.ts";
import type { Candidate } from "./types.ts";
import { unevenSolve } from "./unevenSolve.ts";
import { unitFactor } from "./unitFactor.ts";
import { zeroed } from "./zeroed.ts";

/** Every signature that is looked for, one a file; of two that explain the same as simply, the earlier one is told. */
export const CANDIDATES: readonly Candidate[] = [
  signFlipped,
  zeroed,
  spuriousTerm,
  transposed,
  storageOrder,
  singlePrecision,
  unitFactor,
  scaled,
  rowsReordered,
  columnsReordered,
  unevenSolve,
  lowRank,
];
