import { sumWith } from "./algebra.ts";
import type { Algebra, Summation } from "./algebra.ts";

/** Plain numbers in binary64. */
export function plainNumbers(order: Summation): Algebra<number> {
  const add = (a: number, b: number) => a + b;
  return {
    of: (value) => value,
    real: (a) => a,
    add,
    sub: (a, b) => a - b,
    mul: (a, b) => a * b,
    div: (a, b) => a / b,
    scale: (a, factor) => a * factor,
    exp: Math.exp,
    log: Math.log,
    sqrt: Math.sqrt,
    sin: Math.sin,
    cos: Math.cos,
    sum: sumWith(0, add, order),
  };
}
