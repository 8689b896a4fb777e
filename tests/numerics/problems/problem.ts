import type { Field } from "../support/field.ts";
import { published } from "./published.ts";

/** One published test problem: residuals generic over the field, hand-written Jacobian, points of evaluation. */
export interface Problem {
  readonly name: string;
  residuals<T>(field: Field<T>, x: readonly T[]): T[];
  /** Analytic Jacobian, one array per residual. */
  jacobian(x: readonly number[]): number[][];
  readonly points: readonly (readonly number[])[];
}

/** Start, ten times the start (the authors' own second start), a third of the way to the minimiser, the minimiser. */
export function fourPoints(name: string): number[][] {
  const start = published(name).x0.map(Number);
  const minimiser = published(name).xstar.map(Number);
  return [
    start,
    start.map((value) => 10 * value),
    start.map((value, j) => value + 0.35 * (at(minimiser, j) - value)),
    minimiser,
  ];
}

/** `from`, `from + 1`, ... `to`. */
export function range(from: number, to: number): number[] {
  return Array.from({ length: to - from + 1 }, (_, k) => from + k);
}

export function at<T>(x: readonly T[], index: number): T {
  const value = x[index];
  if (value === undefined) throw new RangeError(`no element ${index}`);
  return value;
}

/** The first elements of x, for destructuring by name. */
export function two<T>(x: readonly T[]): [T, T] {
  return [at(x, 0), at(x, 1)];
}
export function three<T>(x: readonly T[]): [T, T, T] {
  return [at(x, 0), at(x, 1), at(x, 2)];
}
export function four<T>(x: readonly T[]): [T, T, T, T] {
  return [at(x, 0), at(x, 1), at(x, 2), at(x, 3)];
}

/** x^n for a whole number n >= 0 by repeated multiplication, the same in both fields. */
export function power<T>(field: Field<T>, x: T, n: number): T {
  let result = field.of(1);
  for (let k = 0; k < n; k += 1) result = field.mul(result, x);
  return result;
}

/** a - c and a + c for a real constant c. */
export function minus<T>(field: Field<T>, a: T, c: number): T {
  return field.sub(a, field.of(c));
}
export function plus<T>(field: Field<T>, a: T, c: number): T {
  return field.add(a, field.of(c));
}
