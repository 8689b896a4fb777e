import { explain } from "./explain.ts";
import { columnsOf, lineOf, linesWith, rowsOf } from "./lines.ts";
import type { Lines } from "./lines.ts";
import { holds } from "./moved.ts";
import { findPermutation } from "./permutation.ts";
import type { Permutation } from "./permutation.ts";
import type { Candidate, Match, SideNames, Trial } from "./types.ts";
import { lineName } from "./words.ts";

/** Moves told one by one. */
const MOST_TOLD = 6;

/** `rows-reordered`: r with rows permuted; whole blocks only. Parameters: none for a reversal, one for a swap or shift, else one a row. */
export const rowsReordered: Candidate = (trial) =>
  reordered(trial, rowsOf(trial.evidence), "rows-reordered", "rows", trial.evidence.names.output);

/** `columns-reordered`: r with columns permuted, as `rows-reordered`. */
export const columnsReordered: Candidate = (trial) =>
  reordered(trial, columnsOf(trial.evidence), "columns-reordered", "columns", trial.evidence.names.input);

function reordered(
  trial: Trial,
  lines: Lines,
  code: "rows-reordered" | "columns-reordered",
  word: string,
  side: SideNames,
): Match | null {
  const { evidence, entries } = trial;
  if (trial.width !== "block" || entries.length < 2) return null;
  const permutation = findPermutation(evidence, lines, linesWith(lines, entries));
  if (permutation === null) return null;
  const from = new Map(permutation.to.map((line, t) => [line, permutation.from[t]]));
  const explanation = explain(entries, (k) => {
    const line = lineOf(lines, k);
    const source = from.get(line) ?? -1;
    return source >= 0 && holds(evidence, k, k + (source - line) * lines.lineStride);
  });
  if (explanation === null) return null;
  return {
    code,
    parameters: parametersOf(permutation),
    explained: explanation.explained,
    settled: entries,
    say: () => sentence(permutation, lines, word, side),
    alternatives: [],
  };
}

function parametersOf({ kind, to }: Permutation): number {
  if (kind === "reversal") return 0;
  return kind === "other" ? to.length - 1 : 1;
}

function sentence({ kind, to, from, by }: Permutation, lines: Lines, word: string, side: SideNames): string {
  const name = (line: number) => lineName(side, lines.count, line);
  const among =
    to.length === lines.count ? `The ${word} are` : `${capital(word)} ${name(to[0])} to ${name(to[to.length - 1])} are`;
  if (kind === "swap") return `${capital(word)} ${name(to[0])} and ${name(to[1])} of the reference are swapped.`;
  if (kind === "reversal") return `${among} those of the reference in reverse order.`;
  if (kind === "shift") {
    const forwards = by <= to.length / 2;
    const places = forwards ? by : to.length - by;
    const direction = forwards ? "down" : "up";
    const way = word === "rows" ? direction : forwards ? "right" : "left";
    return `${among} those of the reference shifted ${way} by ${places}, the last ones come first again.`;
  }
  const moves = to.flatMap((line, t) =>
    from[t] >= 0 && from[t] !== line ? [`${name(line)} holds ${name(from[t])}`] : [],
  );
  const more = moves.length > MOST_TOLD ? `; and ${moves.length - MOST_TOLD} more` : "";
  return `The ${word} are those of the reference in another order: ${moves.slice(0, MOST_TOLD).join("; ")}${more}.`;
}

function capital(word: string): string {
  return word.charAt(0).toUpperCase() + word.slice(1);
}
