import { describe, expect, it } from "vitest";
import { complexNumbers } from "../../../scripts/demo/algebra/complex.ts";
import { dualNumbers, seeded } from "../../../scripts/demo/algebra/dual.ts";
import {
  jacobianByComplexStep,
  jacobianByDifferences,
  jacobianByDuals,
} from "../../../scripts/demo/checks/jacobians.ts";
import type { Code, Matrix } from "../../../scripts/demo/checks/jacobians.ts";
import { derivativeOf } from "../../../scripts/demo/checks/makeBlock.ts";
import { BLOCK_MODELS } from "../../../scripts/demo/models/index.ts";
import type { BlockModel, Trait } from "../../../scripts/demo/models/types.ts";

/** Changes of models whose derivatives were changed with them. */
const SOUND: readonly (readonly Trait[])[] = [
  [],
  ["blade-camber", "rotor-tip-loss", "drivetrain-friction", "drivetrain-friction-partials"],
  ["wake-meander", "cost-drilling"],
];

const cases = BLOCK_MODELS.flatMap((block) =>
  Object.entries(block.points).flatMap(([point, x]) =>
    SOUND.map((traits) => ({
      name: `${block.model} ${block.output.name} ${point} [${traits.join()}]`,
      block,
      x,
      traits,
    })),
  ),
);

const codeOf = (block: BlockModel, traits: readonly Trait[]): Code => ({
  block,
  traits: new Set(traits),
  summation: "forward",
});

/** Largest |a - b| over max(|b|, a thousandth of the largest |b|). */
function distance(a: Matrix, b: Matrix): number {
  const floor = 1e-3 * Math.max(...b.flat().map(Math.abs));
  return Math.max(
    ...b.flatMap((row, r) =>
      row.map((value, c) => Math.abs((a[r]?.[c] as number) - value) / Math.max(Math.abs(value), floor)),
    ),
  );
}

describe("the demo's models", () => {
  it.each(cases)(
    "$name: the derivative is that of dual numbers, complex step and differences",
    ({ block, x, traits }) => {
      const code = codeOf(block, traits);
      const derivative = derivativeOf(code, x);
      const dual = jacobianByDuals(code, x);
      expect(derivative.length).toBe(block.output.elements.length);
      expect(derivative.every((row) => row.length === block.input.elements.length)).toBe(true);
      expect(distance(derivative, dual)).toBeLessThan(1e-13);
      expect(distance(jacobianByComplexStep(code, x, 1e-20), dual)).toBeLessThan(1e-13);
      expect(distance(jacobianByDifferences(code, x, { scheme: "central-difference", step: 1e-6 }), dual)).toBeLessThan(
        1e-5,
      );
    },
  );

  it("gives the same numbers on both platforms but for the last bits", () => {
    for (const block of BLOCK_MODELS) {
      const x = Object.values(block.points)[0] as readonly number[];
      const forward = jacobianByDuals(codeOf(block, []), x);
      const backward = jacobianByDuals({ ...codeOf(block, []), summation: "backward" }, x);
      expect(distance(backward, forward)).toBeLessThan(1e-13);
    }
  });

  it("names every element of a block once", () => {
    for (const { input, output, points } of BLOCK_MODELS) {
      expect(new Set(input.elements).size).toBe(input.elements.length);
      expect(new Set(output.elements).size).toBe(output.elements.length);
      for (const x of Object.values(points)) expect(x.length).toBe(input.elements.length);
    }
  });
});

describe("the algebras", () => {
  it("differentiate every operation as its rule says", () => {
    const dual = dualNumbers("forward");
    const complex = complexNumbers("forward");
    const x = 0.7;
    const rules = [
      ["exp", Math.exp(x)],
      ["log", 1 / x],
      ["sqrt", 0.5 / Math.sqrt(x)],
      ["sin", Math.cos(x)],
      ["cos", -Math.sin(x)],
    ] as const;
    for (const [operation, slope] of rules) {
      expect(dual[operation](seeded(x)).tangent).toBeCloseTo(slope, 14);
      expect(complex[operation]({ re: x, im: 1e-20 }).im / 1e-20).toBeCloseTo(slope, 14);
    }
    expect(dual.div(dual.of(3), seeded(x)).tangent).toBeCloseTo(-3 / x ** 2, 13);
    expect(complex.div(complex.of(3), { re: x, im: 1e-20 }).im / 1e-20).toBeCloseTo(-3 / x ** 2, 13);
    expect(dual.mul(seeded(x), seeded(x)).tangent).toBeCloseTo(2 * x, 14);
  });
});
