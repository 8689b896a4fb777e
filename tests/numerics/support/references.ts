import type { ReferenceNumbers, ReferenceStep } from "../../../shared/numerics/types.ts";
import type { Problem } from "../problems/problem.ts";
import { COMPLEX, REAL } from "./field.ts";

export type Difference = "forward-difference" | "backward-difference" | "central-difference";

/** A reference with everything optional left out. */
export function reference(
  method: ReferenceNumbers["method"],
  steps: readonly ReferenceStep[],
  rest: Partial<ReferenceNumbers> = {},
): ReferenceNumbers {
  return {
    method,
    stepKind: "absolute",
    precision: null,
    columns: null,
    steps,
    uncertainty: null,
    notFinite: 0,
    ...rest,
  };
}

type Vector = (x: readonly number[]) => number[];

/** Difference quotient of `evaluate` at x; steps are relative to max(|x|, 1). Row-major. */
export function differenceOf(evaluate: Vector, x: readonly number[], method: Difference, step: number): Float64Array {
  const base = evaluate(x);
  const values = new Float64Array(base.length * x.length);
  x.forEach((value, j) => {
    const h = step * Math.max(Math.abs(value), 1);
    const moved = (by: number) => evaluate(x.map((other, k) => (k === j ? other + by : other)));
    const up = method === "backward-difference" ? base : moved(h);
    const down = method === "forward-difference" ? base : moved(-h);
    const width = method === "central-difference" ? 2 * h : h;
    base.forEach((_, i) => {
      values[i * x.length + j] = ((up[i] ?? NaN) - (down[i] ?? NaN)) / width;
    });
  });
  return values;
}

/** A difference reference of a vector function, one step or a sweep. */
export function differences(
  evaluate: Vector,
  x: readonly number[],
  method: Difference,
  steps: readonly number[],
  rest: Partial<ReferenceNumbers> = {},
): ReferenceNumbers {
  const made = steps.map((step) => ({ step, values: differenceOf(evaluate, x, method, step) }));
  return reference(method, made, { stepKind: "relative", ...rest });
}

/** Residuals of a problem in real arithmetic. */
export function realResiduals(problem: Problem): Vector {
  return (x) => problem.residuals(REAL, x);
}

/** Complex-step reference of a problem with an absolute step. */
export function complexStep(problem: Problem, x: readonly number[], step = 1e-20): ReferenceNumbers {
  const rows = problem.residuals(REAL, x).length;
  const values = new Float64Array(rows * x.length);
  x.forEach((_, j) => {
    const shifted = x.map((value, k) => ({ re: value, im: k === j ? step : 0 }));
    problem.residuals(COMPLEX, shifted).forEach((f, i) => {
      values[i * x.length + j] = f.im / step;
    });
  });
  return reference("complex-step", [{ step, values }]);
}
