import type { ColumnStudyRow } from "../../shared/schemas/steps.ts";

/** Ends of a logarithmic axis, whole powers of ten. */
export interface Decades {
  readonly min: number;
  readonly max: number;
}

/** A curve that has no measured step on it is shown so many decades to both sides. */
const SIDE = 3;
const LOWEST = -18;
const HIGHEST = 4;

/** The modelled branches of a column at a step h. */
export function branchesAt(curve: NonNullable<ColumnStudyRow["curve"]>, h: number) {
  const truncation = Number(curve.truncation) * h ** curve.order;
  const rounding = Number(curve.rounding) / h;
  return { truncation, rounding, sum: truncation + rounding + Number(curve.floor) };
}

/** The own best step of a column, or null. */
export const bestStepOf = (column: ColumnStudyRow) => column.candidates[0]?.step ?? null;

/** Steps to be shown: the posted ones and the best one, with room on both sides. */
export function stepDecades(column: ColumnStudyRow): Decades {
  const best = bestStepOf(column);
  const steps = [...column.steps.map(({ step }) => step), ...(best === null ? [] : [best])].map(Math.log10);
  const side = column.steps.length > 1 ? 0.4 : SIDE;
  return {
    min: 10 ** Math.floor(Math.min(...steps) - side),
    max: 10 ** Math.ceil(Math.max(...steps) + side),
  };
}

/** Uncertainties to be shown: those of the steps, of the best one and the tolerance. */
export function uncertaintyDecades(column: ColumnStudyRow, rtol: number): Decades {
  const best = column.candidates[0]?.resolution;
  const told = column.steps.flatMap(({ uncertainty }) => [uncertainty.median, uncertainty.largest]);
  const values = [...told, ...(best ? [best.median] : []), rtol].map(Number);
  const logs = values.filter((value) => value > 0 && value < Infinity).map(Math.log10);
  return {
    min: 10 ** Math.max(LOWEST, Math.floor(Math.min(...logs) - 0.6)),
    max: 10 ** Math.min(HIGHEST, Math.ceil(Math.max(...logs) + 0.3)),
  };
}

/** Steps at which a curve is drawn, evenly spaced on the logarithmic axis. */
export function sampledSteps({ min, max }: Decades, count = 121): number[] {
  const [from, to] = [Math.log10(min), Math.log10(max)];
  return Array.from({ length: count }, (_, k) => 10 ** (from + ((to - from) * k) / (count - 1)));
}
