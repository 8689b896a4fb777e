/**
 * Ten formulas whose derivatives are worked out symbolically by mathjs (Apache-2.0, an independent implementation of
 * the rules of differentiation), judged against differences of the formulas themselves.
 */
import { derivative, parse } from "mathjs";
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import type { BlockNumbers, ReferenceNumbers } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { differences } from "./support/references.ts";

interface Formula {
  readonly text: string;
  readonly at: Readonly<Record<string, number>>;
}

/** Invented, of the kinds that engineering models are made of; the inputs are away from their singularities. */
const FORMULAS: readonly Formula[] = [
  { text: "0.5 * rho * area * cp * v^3", at: { rho: 1025, area: 314.2, cp: 0.41, v: 2.3 } },
  { text: "a * exp(-b * t) * cos(w * t + p)", at: { a: 1.7, b: 0.21, t: 3.1, w: 2.2, p: 0.4 } },
  { text: "sqrt(x^2 + y^2 + z^2)", at: { x: 3.5, y: -1.25, z: 0.75 } },
  { text: "log(1 + exp(k * (s - m)))", at: { k: 4.2, s: 0.61, m: 0.5 } },
  { text: "atan(lift / drag) - twist", at: { lift: 840, drag: 37, twist: 0.11 } },
  { text: "(p / q)^g / (1 + r * q)", at: { p: 5.1, q: 2.4, g: 1.31, r: 0.07 } },
  { text: "h * sinh(l / h) - h * cosh(l / (2 * h))", at: { h: 42, l: 65 } },
  { text: "tan(th) * sin(2 * th) + c / th", at: { th: 0.55, c: 0.03 } },
  { text: "t * d / (2 * log(d / e))", at: { t: 0.02, d: 1.4, e: 0.35 } },
  { text: "x1 * x2 * x3 - x1^3 / x2 + 7", at: { x1: 1.1, x2: -2.3, x3: 0.9 } },
];

function evaluatorOf({ text, at }: Formula): (x: readonly number[]) => number[] {
  const compiled = parse(text).compile();
  const names = Object.keys(at);
  return (x) => [numberOf(compiled.evaluate(Object.fromEntries(names.map((name, j) => [name, x[j]]))))];
}

function numberOf(value: unknown): number {
  if (typeof value !== "number") throw new TypeError(`${String(value)} is not a number`);
  return value;
}

function gradientOf({ text, at }: Formula): Float64Array {
  return Float64Array.from(Object.keys(at), (name) => numberOf(derivative(text, name).evaluate({ ...at })));
}

function blockOf(formula: Formula, gradient: Float64Array, reference: ReferenceNumbers): BlockNumbers {
  const x = Object.values(formula.at);
  return {
    rows: 1,
    columns: x.length,
    outputValues: Float64Array.from(evaluatorOf(formula)(x)),
    inputValues: Float64Array.from(x),
    derivative: gradient,
    references: [reference],
  };
}

describe.each(FORMULAS)("$text", (formula) => {
  const x = Object.values(formula.at);
  const evaluate = evaluatorOf(formula);
  const gradient = gradientOf(formula);
  const central = differences(evaluate, x, "central-difference", [1e-2, 1e-3, 1e-4, 1e-5, 1e-6]);

  it("has a symbolic gradient that a central sweep confirms to 1e-6", () => {
    const { counts } = judgeBlock(blockOf(formula, gradient, central), DEFAULT_TOLERANCES);
    expect(counts).toMatchObject({ agrees: x.length, entries: x.length });
  });

  it.each(["forward-difference", "backward-difference"] as const)("is not accused by a %s", (method) => {
    for (const steps of [[1e-8], [1e-4, 1e-5, 1e-6, 1e-7, 1e-8]]) {
      const single = differences(evaluate, x, method, steps);
      const { counts } = judgeBlock(blockOf(formula, gradient, single), DEFAULT_TOLERANCES);
      expect(counts).toMatchObject({ disagrees: 0, invalid: 0, unreferenced: 0 });
      const loose = judgeBlock(blockOf(formula, gradient, single), { ...DEFAULT_TOLERANCES, rtol: 1e-3 });
      expect(loose.counts.agrees).toBe(x.length);
    }
  });

  it("is accused entry by entry when one partial is that of another formula", () => {
    gradient.forEach((partial, j) => {
      const wrong = gradient.map((value, k) => (k === j ? 2 * partial + 0.1 : value));
      const { verdict } = judgeBlock(blockOf(formula, wrong, central), DEFAULT_TOLERANCES);
      expect([...verdict]).toEqual(x.map((_, k) => (k === j ? 1 : 0)));
    });
  });
});
