import type { BlockNumbers, ReferenceNumbers } from "../../../shared/numerics/types.ts";
import type { Problem } from "../problems/problem.ts";
import { REAL } from "./field.ts";

/** Row-major copy of nested rows. */
export function flat(rows: readonly (readonly number[])[]): Float64Array {
  return Float64Array.from(rows.flat());
}

/** A block of a problem at x: its analytic Jacobian as the derivative, unless another is given. */
export function problemBlock(
  problem: Problem,
  x: readonly number[],
  references: readonly ReferenceNumbers[],
  derivative: Float64Array = flat(problem.jacobian(x)),
): BlockNumbers {
  const outputs = problem.residuals(REAL, x);
  return {
    rows: outputs.length,
    columns: x.length,
    outputValues: Float64Array.from(outputs),
    inputValues: Float64Array.from(x),
    derivative,
    references,
  };
}

/** A block from plain numbers. */
export function block(
  derivative: readonly (readonly number[])[],
  references: readonly ReferenceNumbers[],
  values: { readonly outputs?: readonly number[]; readonly inputs?: readonly number[] } = {},
): BlockNumbers {
  return {
    rows: derivative.length,
    columns: derivative[0]?.length ?? 0,
    outputValues: values.outputs === undefined ? null : Float64Array.from(values.outputs),
    inputValues: values.inputs === undefined ? null : Float64Array.from(values.inputs),
    derivative: flat(derivative),
    references,
  };
}
