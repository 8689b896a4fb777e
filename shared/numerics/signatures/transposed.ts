import { movedWhole } from "./moved.ts";
import type { Candidate } from "./types.ts";

/** `transposed`: a_ij = r_ji in a square block. No parameters; whole blocks only. */
export const transposed: Candidate = (trial) => {
  const { rows, columns } = trial.evidence;
  if (trial.width !== "block" || rows !== columns || rows < 2) return null;
  return movedWhole(trial, (k) => (k % columns) * columns + Math.floor(k / columns), {
    code: "transposed",
    parameters: 0,
    say: () => "The block is the reference transposed: rows and columns have changed places.",
    alternatives: ["It may also be stored column by column and read row by row, which is the same in a square block."],
  });
};
