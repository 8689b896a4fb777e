/** A directional derivative is judged as a block of one column. */
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { VERDICT_CODE } from "../../shared/domain/vocabulary.ts";
import { judgeDirectional } from "../../shared/numerics/probes/judgeDirectional.ts";

const f = (t: number) => [Math.sin(1 + t), Math.exp(t), 3 + t];
const derivative = [Math.cos(1), 1, 1];
const step = 1e-5;
const reference = f(step).map((up, i) => (up - f(-step)[i]!) / (2 * step));
const outputs = Float64Array.from(f(0));
const probe = { method: "central-difference" as const, step, derivative, reference };

describe("a directional probe", () => {
  it("agrees entry by entry at the step that was posted", () => {
    const { numbers, judged } = judgeDirectional(probe, outputs, { ...DEFAULT_TOLERANCES, rtol: 1e-5 });
    expect([numbers.rows, numbers.columns]).toEqual([3, 1]);
    expect(judged.counts).toMatchObject({ entries: 3, agrees: 3 });
    expect(judged.best.kinds).toEqual(["modelled"]);
    expect(judged.best.assumed).toEqual([true]);
  });

  it("accuses the wrong element and no other", () => {
    const wrong = { ...probe, derivative: [derivative[0]!, 1.01, 1] };
    const { judged } = judgeDirectional(wrong, outputs, { ...DEFAULT_TOLERANCES, rtol: 1e-5 });
    expect([...judged.verdict]).toEqual([VERDICT_CODE.agrees, VERDICT_CODE.disagrees, VERDICT_CODE.agrees]);
    expect(judged.worst).toMatchObject({ row: 1, column: 0 });
  });

  it("takes the output values only where there is one for each element", () => {
    expect(judgeDirectional(probe, Float64Array.of(1, 2), DEFAULT_TOLERANCES).numbers.outputValues).toBeNull();
    expect(judgeDirectional(probe, null, DEFAULT_TOLERANCES).numbers.outputValues).toBeNull();
    expect(judgeDirectional(probe, outputs, DEFAULT_TOLERANCES).numbers.outputValues).toBe(outputs);
  });

  it("has no reference where that is not finite, and is invalid where the derivative is not", () => {
    const holed = { ...probe, derivative: [NaN, 1, 1], reference: [1, Infinity, 1] };
    const { judged } = judgeDirectional(holed, outputs, DEFAULT_TOLERANCES);
    expect([...judged.verdict].slice(0, 2)).toEqual([VERDICT_CODE.invalid, VERDICT_CODE.unreferenced]);
    expect(judged.best.findings.map(({ code }) => code)).toContain("reference-not-finite");
  });

  it("refuses lists of two lengths", () => {
    expect(() => judgeDirectional({ ...probe, reference: [1] }, null, DEFAULT_TOLERANCES)).toThrow(
      /^reference: 1 numbers/,
    );
  });

  it("without a step, by an exact method, knows the derivative to rounding", () => {
    const exact = { method: "ad-forward" as const, step: null, derivative, reference: derivative };
    expect(judgeDirectional(exact, null, DEFAULT_TOLERANCES).judged.counts.agrees).toBe(3);
  });
});
