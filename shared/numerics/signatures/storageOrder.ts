import { movedWhole } from "./moved.ts";
import type { Candidate, Match, Trial } from "./types.ts";

/**
 * `storage-order`: the reference written column by column and read row by row, or the other way round, in a block that
 * is not square (where it is, that is `transposed`). No parameters; whole blocks only.
 */
export const storageOrder: Candidate = (trial) => {
  const { rows, columns } = trial.evidence;
  if (trial.width !== "block" || rows === columns || rows < 2 || columns < 2) return null;
  return writtenByColumns(trial) ?? writtenByRows(trial);
};

/** Number k of the row-major derivative is number k of the column-major reference. */
function writtenByColumns(trial: Trial): Match | null {
  const { rows, columns } = trial.evidence;
  return movedWhole(trial, (k) => (k % rows) * columns + Math.floor(k / rows), {
    code: "storage-order",
    parameters: 0,
    say: () => "The block is the reference stored column by column and read row by row.",
    alternatives: [`It may also be the transposed block, ${columns} by ${rows}, posted as ${rows} by ${columns}.`],
  });
}

/** Number k of the column-major derivative is number k of the row-major reference. */
function writtenByRows(trial: Trial): Match | null {
  const { rows, columns } = trial.evidence;
  return movedWhole(trial, (k) => (k % columns) * rows + Math.floor(k / columns), {
    code: "storage-order",
    parameters: 0,
    say: () => "The block is the reference stored row by row and read column by column.",
    alternatives: [],
  });
}
