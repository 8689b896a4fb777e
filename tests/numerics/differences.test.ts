/**
 * Differences and complex steps of two published examples: truncation of the published orders, and uncertainties that
 * cover the published derivative. W. Squire, G. Trapp, SIAM Review 40(1):110-112, 1998; C. J. F. Ridders, Advances in
 * Engineering Software 4(2):75-76, 1982 (reference/squire-trapp, reference/ridders).
 */
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { UNIT_ROUNDOFF } from "../../shared/numerics/roundoff.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { power } from "./problems/problem.ts";
import type { Problem } from "./problems/problem.ts";
import { exponentialOverCubes } from "./problems/squireTrapp.ts";
import { problemBlock } from "./support/blocks.ts";
import { expectTable } from "./support/expectTable.ts";
import { REAL } from "./support/field.ts";
import { readReference } from "./support/readReference.ts";
import type { Difference } from "./support/references.ts";
import { complexStep, differences, realResiduals } from "./support/references.ts";

const TRUNCATION = readReference<{
  readonly rows: readonly Readonly<Record<"h" | "forward" | "central" | "complexStep", number>>[];
}>("squire-trapp/truncation.json").rows;

const RIDDERS = readReference<{ readonly x: number; readonly f: string; readonly f1: string }>("ridders/example.json");

const ridders: Problem = {
  name: "e^x/(sin x - x^2)",
  residuals: (f, x) => {
    const [angle = f.of(NaN)] = x;
    return [f.div(f.exp(angle), f.sub(f.sin(angle), power(f, angle, 2)))];
  },
  jacobian: () => [[Number(RIDDERS.f1)]],
  points: [[RIDDERS.x]],
};

const X = [1.5];
const SLOPE = exponentialOverCubes.jacobian(X)[0]?.[0] ?? NaN;

/** Relative error of one estimate of the second example at 1.5, with its sign; h is absolute. */
function errorOf(method: Difference | "complex-step", h: number): number {
  const made =
    method === "complex-step"
      ? complexStep(exponentialOverCubes, X, h)
      : differences(realResiduals(exponentialOverCubes), X, method, [h / 1.5]);
  return ((made.steps[0]?.values[0] ?? NaN) - SLOPE) / SLOPE;
}

describe("Squire and Trapp's second example", () => {
  it("truncates as computed at 60 digits", () => {
    const size = Math.abs((exponentialOverCubes.residuals(REAL, X)[0] ?? NaN) / SLOPE);
    const rows = TRUNCATION.flatMap(({ h, forward, central, complexStep: complex }) => {
      // Two values, each right to a few roundings, over h; the complex step subtracts nothing.
      const tolerance = (16 * UNIT_ROUNDOFF * size) / h;
      return [
        { label: `forward, h = ${h}`, actual: errorOf("forward-difference", h), expected: forward, tolerance },
        { label: `central, h = ${h}`, actual: errorOf("central-difference", h), expected: central, tolerance },
        {
          label: `complex step, h = ${h}`,
          actual: errorOf("complex-step", h),
          expected: complex,
          tolerance: 64 * UNIT_ROUNDOFF,
        },
      ];
    });
    expect(rows.length).toBeGreaterThanOrEqual(12);
    expectTable("truncation", rows);
  });
});

describe("Ridders' example", () => {
  it("has the published value", () => {
    const expected = Number(RIDDERS.f);
    const actual = ridders.residuals(REAL, [RIDDERS.x])[0] ?? NaN;
    expectTable("value", [{ label: "f", actual, expected, tolerance: 16 * UNIT_ROUNDOFF * Math.abs(expected) }]);
  });

  it.each([
    ["central-difference", [1e-2, 5e-3, 2.5e-3, 1.25e-3, 6.25e-4, 3.125e-4, 1.5625e-4], 1e-5],
    ["central-difference", [1e-2, 1e-3, 1e-4, 1e-5, 1e-6], 1e-7],
    ["forward-difference", [1e-4, 1e-5, 1e-6, 1e-7, 1e-8], 1e-5],
    ["central-difference", [1e-3, 1e-4, 1e-5], 1e-6],
  ] as const)("is known by a sweep as well as its U says: %s %j", (method, steps, sharp) => {
    const sweep = differences(realResiduals(ridders), [RIDDERS.x], method, steps);
    const { best } = judgeBlock(problemBlock(ridders, [RIDDERS.x], [sweep]), DEFAULT_TOLERANCES);
    const slope = Number(RIDDERS.f1);
    const [value = NaN] = best.value;
    const [uncertainty = NaN] = best.uncertainty;
    expect(Math.abs(value - slope)).toBeLessThanOrEqual(uncertainty);
    // Covering alone would be easy: the uncertainty must be of use, too.
    expect(uncertainty / slope).toBeLessThan(sharp);
  });

  it("is known to rounding by a complex step", () => {
    const reference = complexStep(ridders, [RIDDERS.x]);
    const { best } = judgeBlock(problemBlock(ridders, [RIDDERS.x], [reference]), DEFAULT_TOLERANCES);
    const [value = NaN] = best.value;
    const [uncertainty = NaN] = best.uncertainty;
    expect(Math.abs(value - Number(RIDDERS.f1))).toBeLessThanOrEqual(uncertainty);
    expect(uncertainty / Number(RIDDERS.f1)).toBeLessThan(1e-14);
  });
});
