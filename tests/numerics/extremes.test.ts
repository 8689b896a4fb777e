/** Numbers at the ends of binary64 and numbers that are none (section 8 of the judging rules). */
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import type { ReferenceMethod, Verdict } from "../../shared/domain/vocabulary.ts";
import { REFERENCE_METHODS, VERDICTS } from "../../shared/domain/vocabulary.ts";
import type { ReferenceNumbers } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { block } from "./support/blocks.ts";
import { reference } from "./support/references.ts";

const LARGEST = Number.MAX_VALUE;
const SMALLEST = Number.MIN_VALUE;

/** One reference of a method with a step that suits it. */
function made(
  method: ReferenceMethod,
  values: readonly number[],
  rest: Partial<ReferenceNumbers> = {},
): ReferenceNumbers {
  const step = method.includes("difference") ? 1e-6 : method === "complex-step" ? 1e-20 : null;
  return reference(method, [{ step, values: Float64Array.from(values) }], rest);
}

function judgeRow(
  derivative: readonly number[],
  references: readonly ReferenceNumbers[],
  outputs: readonly number[] = [1],
) {
  const inputs = derivative.map(() => 1);
  const judged = judgeBlock(block([derivative], references, { outputs, inputs }), DEFAULT_TOLERANCES);
  const verdicts = [...judged.verdict].map((code): Verdict | undefined => VERDICTS[code]);
  return { ...judged, verdicts };
}

describe.each(REFERENCE_METHODS)("against a reference of method %s", (method) => {
  it("right entries of any magnitude agree or stay unresolved, and nothing is NaN", () => {
    for (const value of [0, -0, SMALLEST, 2 ** -1022, 1e-300, 1e-12, 1, 1e150, 1e300, LARGEST]) {
      for (const sign of [1, -1]) {
        const { verdicts, best, resolution, worst } = judgeRow([sign * value], [made(method, [sign * value])]);
        expect(["agrees", "unresolved"], `${sign * value}`).toContain(verdicts[0]);
        expect(best.uncertainty[0]).toBeGreaterThanOrEqual(0);
        expect(resolution[0]).toBeGreaterThanOrEqual(0);
        expect(worst?.error).toBe(0);
      }
    }
  });

  it("wrong entries of huge magnitude are told, though |a - r| overflows", () => {
    for (const value of [1e300, 1.5e308, LARGEST]) {
      const { verdicts, worst } = judgeRow([-value], [made(method, [value], { uncertainty: value * 1e-9 })]);
      expect(verdicts).toEqual(["disagrees"]);
      expect(worst?.error).toBeCloseTo(2, 12);
      expect(judgeRow([value], [made(method, [value], { uncertainty: value * 1e-9 })]).verdicts).toEqual(["agrees"]);
    }
  });

  it("entries that are not finite are invalid, with or without a reference", () => {
    const { verdicts, counts } = judgeRow([NaN, Infinity, -Infinity, NaN], [made(method, [1, 1, -Infinity, NaN])]);
    expect(verdicts).toEqual(["invalid", "invalid", "invalid", "invalid"]);
    expect(counts.invalid).toBe(4);
  });

  it("references that are not finite are none, and do not raise the floor", () => {
    const { verdicts, floor, best } = judgeRow([1, 1, 1, 1], [made(method, [NaN, Infinity, -Infinity, 1])]);
    expect(verdicts.slice(0, 3)).toEqual(["unreferenced", "unreferenced", "unreferenced"]);
    expect(["agrees", "unresolved"]).toContain(verdicts[3]);
    expect(floor).toBe(1e-3);
    expect([...best.value]).toEqual([NaN, NaN, NaN, 1]);
  });

  it("a block of which nothing is known is unreferenced, with the absolute floor", () => {
    const { counts, floor } = judgeRow([1, 0, -1], [made(method, [NaN, NaN, NaN])]);
    expect(counts.unreferenced).toBe(3);
    expect(floor).toBe(DEFAULT_TOLERANCES.floorAbs);
  });

  it("a block of exact zeros agrees with itself", () => {
    const { verdicts, floor } = judgeRow([0, -0, 0], [made(method, [0, 0, -0])]);
    expect(verdicts.every((verdict) => verdict === "agrees" || verdict === "unresolved")).toBe(true);
    expect(floor).toBe(DEFAULT_TOLERANCES.floorAbs);
    // Of 0 at least a step that sees, and methods without one, know that nothing changed.
    if (method !== "complex-step") expect(verdicts).toEqual(["agrees", "agrees", "agrees"]);
  });
});

describe("minus zero", () => {
  it("is zero on either side", () => {
    const exact = (r: number) => made("analytic", [r], { uncertainty: 0 });
    expect(judgeRow([-0], [exact(0)]).verdicts).toEqual(["agrees"]);
    expect(judgeRow([0], [exact(-0)]).verdicts).toEqual(["agrees"]);
  });
});

describe("tolerances of zero", () => {
  it("compare exactly, without dividing by a floor of zero", () => {
    const none = { rtol: 0, floorRel: 0, floorAbs: 0 };
    const exact = made("analytic", [0, 0, 2], { uncertainty: 0 });
    const { verdict, resolution, worst } = judgeBlock(block([[0, 1e-300, 2]], [exact]), none);
    expect([...verdict].map((code) => VERDICTS[code])).toEqual(["agrees", "disagrees", "agrees"]);
    expect([...resolution]).toEqual([0, 0, 0]);
    expect(worst).toMatchObject({ column: 1, error: Infinity });
  });

  it("resolve nothing that has an uncertainty", () => {
    const { verdict, resolution } = judgeBlock(block([[0]], [made("analytic", [0], { uncertainty: 1e-9 })]), {
      rtol: 1e-6,
      floorRel: 0,
      floorAbs: 0,
    });
    expect(VERDICTS[verdict[0] ?? -1]).toBe("unresolved");
    expect(resolution[0]).toBe(Infinity);
  });
});

describe("output values", () => {
  it("of any magnitude leave right entries unaccused", () => {
    for (const output of [0, SMALLEST, 1e-300, 1e300, LARGEST, -LARGEST, NaN, Infinity]) {
      for (const method of REFERENCE_METHODS) {
        const { verdicts, best } = judgeRow([1], [made(method, [1 + 1e-12])], [output]);
        expect(["agrees", "unresolved"]).toContain(verdicts[0]);
        expect(best.uncertainty[0]).toBeGreaterThanOrEqual(0);
      }
    }
  });
});

describe("the worst entry", () => {
  const exact = made("analytic", [1, 1, 1, 1], { uncertainty: 0 });
  it("is the worst by verdict, then by relative error, then the first", () => {
    expect(judgeRow([1, 2, NaN, 9], [exact]).worst).toMatchObject({ column: 2, error: NaN });
    expect(judgeRow([1, 2, 3, 3], [exact]).worst).toMatchObject({ column: 2, error: 2 });
    expect(judgeRow([1, 1 + 1e-9, 1, 1], [exact]).worst).toMatchObject({ column: 1 });
    const coarse = made("analytic", [1, 1, 1, 1], { uncertainty: Float64Array.of(0, 0, 1, 0) });
    expect(judgeRow([1, 1 + 1e-9, 1, 1], [coarse]).worst).toMatchObject({ column: 2, error: 0, uncertainty: 1 });
    expect(judgeRow([1, 1 + 1e-5, 1, 1], [coarse]).worst).toMatchObject({ column: 1 });
  });
});

describe("a large block", () => {
  it("is judged in bands as in one piece: every verdict and the worst entry are where they belong", () => {
    const rows = 150;
    const columns = 77;
    const values = Float64Array.from({ length: rows * columns }, (_, k) => 1 + (k % 7));
    const derivative = values.slice();
    const wrong = [0, 76, 77, 4095, 4096, 8191, 8192, rows * columns - 1];
    for (const k of wrong) derivative[k] = -(k + 1);
    const judged = judgeBlock(
      {
        rows,
        columns,
        outputValues: new Float64Array(rows).fill(1),
        inputValues: new Float64Array(columns).fill(1),
        derivative,
        references: [reference("central-difference", [{ step: 1e-6, values }])],
      },
      DEFAULT_TOLERANCES,
    );
    expect([...judged.verdict].flatMap((code, k) => (VERDICTS[code] === "disagrees" ? [k] : []))).toEqual(wrong);
    expect(judged.counts).toMatchObject({ disagrees: wrong.length, agrees: rows * columns - wrong.length });
    expect(judged.best.uncertainty.every((u, k) => u < 1e-6 * (values[k] ?? NaN))).toBe(true);
    expect(judged.worst?.reference).toBe(values[(judged.worst?.row ?? NaN) * columns + (judged.worst?.column ?? NaN)]);
  });
});
