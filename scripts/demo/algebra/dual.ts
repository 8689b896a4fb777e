import type { Algebra } from "./algebra.ts";

/** A value and its slopes against every input: forward mode, all columns in one pass. */
export interface Dual {
  readonly value: number;
  readonly slopes: Float64Array;
}

/** Dual numbers over `inputs` inputs. */
export function dual(inputs: number): Algebra<Dual> {
  const zero = new Float64Array(inputs);
  const linear = (value: number, a: Dual, byA: number): Dual => ({ value, slopes: a.slopes.map((s) => s * byA) });
  const both = (value: number, a: Dual, byA: number, b: Dual, byB: number): Dual => ({
    value,
    slopes: a.slopes.map((s, j) => s * byA + b.slopes[j]! * byB),
  });
  return {
    of: (value) => ({ value, slopes: zero }),
    add: (a, b) => both(a.value + b.value, a, 1, b, 1),
    sub: (a, b) => both(a.value - b.value, a, 1, b, -1),
    mul: (a, b) => both(a.value * b.value, a, b.value, b, a.value),
    div: (a, b) => both(a.value / b.value, a, 1 / b.value, b, -a.value / (b.value * b.value)),
    scale: (a, factor) => linear(a.value * factor, a, factor),
    sqrt: (a) => linear(Math.sqrt(a.value), a, 0.5 / Math.sqrt(a.value)),
    exp: (a) => linear(Math.exp(a.value), a, Math.exp(a.value)),
    sin: (a) => linear(Math.sin(a.value), a, Math.cos(a.value)),
    power: (a, exponent) => linear(a.value ** exponent, a, exponent * a.value ** (exponent - 1)),
    value: (a) => a.value,
  };
}

/** The inputs as dual numbers: the slope of each against itself is 1. */
export function seeds(x: readonly number[]): Dual[] {
  return x.map((value, j) => {
    const slopes = new Float64Array(x.length);
    slopes[j] = 1;
    return { value, slopes };
  });
}
