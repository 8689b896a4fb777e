import { complex } from "./algebra/complex.ts";
import { dual, seeds } from "./algebra/dual.ts";
import { real } from "./algebra/real.ts";
import type { Code } from "./code.ts";
import type { DemoModel } from "./models/model.ts";

/** Rows = output elements. */
export type Rows = number[][];

const transposed = (columns: readonly (readonly number[])[]): Rows =>
  columns[0]!.map((_, row) => columns.map((column) => column[row]!));

/** The model's outputs at its point, the input j moved by `step`. */
function moved(model: DemoModel, code: Code, j: number, step: number): number[] {
  const x = model.input.values.map((value, at) => (at === j ? value + step : value));
  return model.evaluate(real, x, code);
}

export const outputs = (model: DemoModel, code: Code): number[] => model.evaluate(real, model.input.values, code);

/** The exact derivative, by one pass with dual numbers. */
export function byDualNumbers(model: DemoModel, code: Code): Rows {
  const algebra = dual(model.input.values.length);
  return model.evaluate(algebra, seeds(model.input.values), code).map(({ slopes }) => Array.from(slopes));
}

/** `steps[j]` is the absolute step of input j, in its unit. */
export function byCentralDifferences(model: DemoModel, code: Code, steps: readonly number[]): Rows {
  const columns = steps.map((step, j) => {
    const [up, down] = [moved(model, code, j, step), moved(model, code, j, -step)];
    return up.map((value, row) => (value - down[row]!) / (2 * step));
  });
  return transposed(columns);
}

export function byForwardDifferences(model: DemoModel, code: Code, steps: readonly number[]): Rows {
  const here = outputs(model, code);
  return transposed(
    steps.map((step, j) => moved(model, code, j, step).map((value, row) => (value - here[row]!) / step)),
  );
}

export function byComplexSteps(model: DemoModel, code: Code, step: number): Rows {
  const columns = model.input.values.map((_, j) => {
    const x = model.input.values.map((re, at) => ({ re, im: at === j ? step : 0 }));
    return model.evaluate(complex, x, code).map(({ im }) => im / step);
  });
  return transposed(columns);
}
