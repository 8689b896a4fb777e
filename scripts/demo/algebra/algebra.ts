/**
 * What a model may do with its numbers. Each model is written once against this, and runs with plain numbers, with dual
 * numbers (its exact derivative) and with complex numbers (its complex step).
 */
export interface Algebra<T> {
  of(value: number): T;
  add(a: T, b: T): T;
  sub(a: T, b: T): T;
  mul(a: T, b: T): T;
  div(a: T, b: T): T;
  /** a times a plain factor. */
  scale(a: T, factor: number): T;
  sqrt(a: T): T;
  exp(a: T): T;
  sin(a: T): T;
  /** a to a plain exponent; a > 0. */
  power(a: T, exponent: number): T;
  /** The number itself, without what it carries of a derivative: for comparisons. */
  value(a: T): number;
}

export function sum<T>(algebra: Algebra<T>, terms: readonly T[]): T {
  return terms.reduce((total, term) => algebra.add(total, term), algebra.of(0));
}

export function product<T>(algebra: Algebra<T>, ...factors: readonly T[]): T {
  return factors.reduce((total, factor) => algebra.mul(total, factor));
}
