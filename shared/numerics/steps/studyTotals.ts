import type { ReferenceMethod } from "../../domain/vocabulary.ts";
import type { StepStudy } from "./types.ts";

/** What a method would give over all columns of a study. */
export interface CandidateTotal {
  readonly method: ReferenceMethod;
  /** Median of its best steps over the columns that have one; null where none has. */
  readonly step: number | null;
  readonly resolved: number;
}

/** Entries of a study, over all its columns. */
export interface StudyTotals {
  readonly entries: number;
  readonly quiet: number;
  readonly resolved: number;
  readonly truncated: number;
  readonly cancelled: number;
  /** The smallest and the largest posted step; null where none is usable. */
  readonly posted: readonly [number, number] | null;
  /** The reference's own method first; empty for a method without steps. */
  readonly candidates: readonly CandidateTotal[];
}

/** Adds up the columns of a study. */
export function studyTotals({ columns }: StepStudy): StudyTotals {
  const sum = (name: "entries" | "quiet" | "resolved" | "truncated" | "cancelled") =>
    columns.reduce((total, column) => total + column[name], 0);
  const steps = columns.flatMap((column) => column.steps.map(({ step }) => step));
  const methods = columns[0]?.candidates.map(({ method }) => method) ?? [];
  return {
    entries: sum("entries"),
    quiet: sum("quiet"),
    resolved: sum("resolved"),
    truncated: sum("truncated"),
    cancelled: sum("cancelled"),
    posted:
      steps.length === 0 ? null : [steps.reduce((a, b) => Math.min(a, b)), steps.reduce((a, b) => Math.max(a, b))],
    candidates: methods.map((method, k) => ({
      method,
      step: middle(columns.flatMap((column) => column.candidates[k]?.step ?? [])),
      resolved: columns.reduce((total, column) => total + (column.candidates[k]?.resolved ?? 0), 0),
    })),
  };
}

function middle(values: readonly number[]): number | null {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted.at(sorted.length >> 1) ?? null;
}
