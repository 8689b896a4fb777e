/**
 * NIST/ITL Statistical Reference Datasets, nonlinear regression (reference/nist-strd/nonlinear.json): twelve analytic
 * Jacobians at the certified parameters. The certified standard deviations say that the Jacobians are right, without
 * the judge; so the judge must say so too.
 */
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { neumaierSum } from "../../shared/numerics/sum/neumaierSum.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { REGRESSIONS } from "./problems/regression.ts";
import { flat, problemBlock } from "./support/blocks.ts";
import { parameterDeviations } from "./support/deviations.ts";
import { expectTable } from "./support/expectTable.ts";
import { REAL } from "./support/field.ts";
import { complexStep } from "./support/references.ts";

describe.each(REGRESSIONS)("$name", ({ name, set, problem }) => {
  const jacobian = problem.jacobian(set.parameters);
  const residuals = problem.residuals(REAL, set.parameters);
  const rss = neumaierSum(residuals.map((residual) => residual * residual));

  it("reproduces the certified standard deviations from the Jacobian", () => {
    const deviations = parameterDeviations(jacobian, rss);
    expectTable(name, [
      { label: "rss", actual: rss, expected: set.rss, tolerance: 1e-9 * set.rss },
      ...deviations.map((actual, j) => {
        const expected = set.deviations[j] ?? NaN;
        return { label: `sd of b${j + 1}`, actual, expected, tolerance: 1e-9 * expected };
      }),
    ]);
  });

  const reference = complexStep(problem, set.parameters);
  const block = problemBlock(problem, set.parameters, [reference]);

  it("is judged to agree with complex steps in every entry", () => {
    const { counts } = judgeBlock(block, { ...DEFAULT_TOLERANCES, rtol: 1e-10 });
    expect(counts).toMatchObject({ entries: set.x.length * set.parameters.length, disagrees: 0, unresolved: 0 });
    expect(counts.agrees).toBe(counts.entries);
  });

  it("is judged wrong where a column is in another unit, which the deviations show as well", () => {
    const wrong = jacobian.map((row) => row.map((value, j) => (j === 1 ? (value * Math.PI) / 180 : value)));
    const { counts } = judgeBlock({ ...block, derivative: flat(wrong) }, DEFAULT_TOLERANCES);
    // Entries under the floor of the block are too small to be told apart from right ones.
    expect(counts.disagrees).toBeGreaterThan(0);
    expect(parameterDeviations(wrong, rss)[1]).toBeGreaterThan(10 * (set.deviations[1] ?? NaN));
  });
});
