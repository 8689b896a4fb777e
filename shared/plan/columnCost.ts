import type { ReferenceMethod } from "../domain/vocabulary.ts";
import { median } from "../numerics/robust/median.ts";

/** What a reference told of its cost, for one column; null where it did not say. */
export interface ToldCost {
  readonly seconds: number | null;
  readonly evaluations: number | null;
}

export type CostUnit = keyof ToldCost;

/** A cost in the unit of the budget, and whether anything about it is assumed. */
export interface ColumnCost {
  readonly cost: number;
  readonly assumed: boolean;
}

/**
 * Evaluations of the function that a reference takes for one column where its job did not tell: two a step for central
 * differences, one a step for the other differences and the complex step, one for anything else. The evaluation at the
 * point itself, which all columns share, is not counted. Domain: steps >= 0 (0 counts as 1).
 */
export function assumedEvaluations(method: ReferenceMethod, steps: number): number {
  const each = method === "central-difference" ? 2 : 1;
  return each * Math.max(1, steps);
}

/** Median of seconds over evaluations where both were told and neither is 0; null where that never was. */
export function secondsPerEvaluation(told: readonly ToldCost[]): number | null {
  const ratios = told.flatMap(({ seconds, evaluations }) =>
    seconds !== null && evaluations !== null && seconds > 0 && evaluations > 0 ? [seconds / evaluations] : [],
  );
  return ratios.length === 0 ? null : median(Float64Array.from(ratios));
}

/**
 * A cost in `unit`: as told in it, else converted by `ratio` (seconds an evaluation), else from the evaluations that
 * are assumed. Without a ratio one evaluation counts as one second, and the cost is marked as assumed.
 */
export function costIn(unit: CostUnit, told: ToldCost | null, evaluations: number, ratio: number | null): ColumnCost {
  const own = told?.[unit] ?? null;
  if (own !== null) return { cost: own, assumed: false };
  const other = (unit === "seconds" ? told?.evaluations : told?.seconds) ?? null;
  const rate = ratio ?? 1;
  if (other === null) return { cost: unit === "seconds" ? evaluations * rate : evaluations, assumed: true };
  return { cost: unit === "seconds" ? other * rate : other / rate, assumed: ratio === null };
}
