import { explain, sampleOf } from "./explain.ts";
import { columnsOf, linesWith, rowsOf } from "./lines.ts";
import { slackOf } from "./slack.ts";
import type { Candidate, Evidence } from "./types.ts";
import { subject } from "./words.ts";

/** A prediction that is blurred by more than this part of the error says nothing. */
const LARGEST_BLUR = 1e-2;
const MOST_CONTRADICTING = 0.05;

/** The entry of the largest error in terms of its slack, and the cross of its row and column through it. */
interface Cross {
  readonly row: number;
  readonly column: number;
  readonly error: number;
  readonly slack: number;
}

/**
 * `term-missing`, where one product of the chain rule is: a - r is of rank 1, an outer product of a column and a row.
 * The cross through the entry with the largest error (in units of its U + T; of a sample where there are many) predicts
 * all others,
 * E_ij = E_iJ E_Ij / E_IJ; whole blocks only, over the rows and columns that disagree, two of each at least.
 * Parameters: rows + columns - 1. Accuracy: each prediction is judged with the slack of the three entries it is from.
 * Source: M. Bebendorf, Approximation of boundary element matrices, Numerische Mathematik 86:565-589, 2000 (the cross).
 */
export const lowRank: Candidate = (trial) => {
  const { evidence, entries } = trial;
  if (trial.width !== "block" || entries.length < 4) return null;
  const cross = largestError(evidence, sampleOf(entries));
  const explanation = explain(entries, (k) => isPredicted(evidence, k, cross, true));
  if (explanation === null) return null;
  const rows = linesWith(rowsOf(evidence), entries);
  const columns = linesWith(columnsOf(evidence), entries);
  const parameters = rows.length + columns.length - 1;
  if (rows.length < 2 || columns.length < 2 || explanation.explained.length <= parameters) return null;
  if (contradicting(evidence, rows, columns, entries, cross)) return null;
  const { explained } = explanation;
  return {
    code: "term-missing",
    parameters,
    explained,
    settled: entries,
    say: (place) =>
      `${subject(evidence, place, explained)} off by one product of a column and a row (rank 1): a term of the chain rule is missing, or there twice.`,
    alternatives: [],
  };
};

function errorAt({ derivative, reference }: Evidence, k: number): number {
  return derivative[k] - reference[k];
}

function largestError(evidence: Evidence, entries: Int32Array): Cross {
  let best = entries[0];
  let most = 0;
  for (const k of entries) {
    const size = Math.abs(errorAt(evidence, k)) / slackOf(evidence, k);
    if (size > most) {
      most = size;
      best = k;
    }
  }
  const { columns } = evidence;
  return {
    row: Math.floor(best / columns),
    column: best % columns,
    error: errorAt(evidence, best),
    slack: slackOf(evidence, best),
  };
}

/** True where E_k is the cross's prediction; `sharp` asks that the prediction could have failed. */
function isPredicted(evidence: Evidence, k: number, cross: Cross, sharp: boolean): boolean {
  const { columns } = evidence;
  const inColumn = Math.floor(k / columns) * columns + cross.column;
  const inRow = cross.row * columns + (k % columns);
  const u = errorAt(evidence, inColumn) / cross.error;
  const v = errorAt(evidence, inRow) / cross.error;
  const error = errorAt(evidence, k);
  const predicted = u * v * cross.error;
  const blur =
    slackOf(evidence, k) +
    Math.abs(v) * slackOf(evidence, inColumn) +
    Math.abs(u) * slackOf(evidence, inRow) +
    Math.abs(u * v) * cross.slack;
  if (sharp && !(blur <= LARGEST_BLUR * Math.abs(error))) return false;
  return Math.abs(error - predicted) <= blur;
}

/** True where entries that do not disagree should, by the cross. Unknown ones say nothing. */
function contradicting(
  evidence: Evidence,
  rows: readonly number[],
  columns: readonly number[],
  entries: Int32Array,
  cross: Cross,
): boolean {
  const most = MOST_CONTRADICTING * rows.length * columns.length;
  let against = 0;
  let at = 0;
  for (const row of rows) {
    for (const column of columns) {
      const k = row * evidence.columns + column;
      while (at < entries.length && entries[at] < k) at += 1;
      if (entries[at] === k || !(slackOf(evidence, k) < Infinity)) continue;
      against += Number(!isPredicted(evidence, k, cross, false));
      if (against > most) return true;
    }
  }
  return false;
}
