import type { Algebra } from "./algebra.ts";

export const real: Algebra<number> = {
  of: (value) => value,
  add: (a, b) => a + b,
  sub: (a, b) => a - b,
  mul: (a, b) => a * b,
  div: (a, b) => a / b,
  scale: (a, factor) => a * factor,
  sqrt: Math.sqrt,
  exp: Math.exp,
  sin: Math.sin,
  power: (a, exponent) => a ** exponent,
  value: (a) => a,
};
