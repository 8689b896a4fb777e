/** Shapes of a block: empty ones, single entries, partial columns, and RangeErrors that name the wrong argument. */
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { bestReference } from "../../shared/numerics/reference/bestReference.ts";
import type { BlockNumbers, ReferenceNumbers } from "../../shared/numerics/types.ts";
import { NO_SOURCE } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { relativeErrors } from "../../shared/numerics/verdict/relativeErrors.ts";
import { block } from "./support/blocks.ts";
import { reference } from "./support/references.ts";

const judge = (numbers: BlockNumbers) => judgeBlock(numbers, DEFAULT_TOLERANCES);
const f64 = (...values: number[]) => Float64Array.from(values);
const central = (values: Float64Array, rest: Partial<ReferenceNumbers> = {}) =>
  reference("central-difference", [{ step: 1e-5, values }], rest);

describe("empty blocks", () => {
  it.each([
    [0, 3],
    [3, 0],
    [0, 0],
  ])("of %d x %d have empty planes, no worst entry and the absolute floor", (rows, columns) => {
    for (const references of [
      [],
      [central(f64())],
      [central(f64()), reference("ad-forward", [{ step: null, values: f64() }])],
    ]) {
      const judged = judge({ rows, columns, outputValues: null, inputValues: null, derivative: f64(), references });
      expect(judged.verdict.length).toBe(0);
      expect(judged.resolution.length).toBe(0);
      expect(judged.best.value.length).toBe(0);
      expect(judged.counts).toEqual({
        entries: 0,
        agrees: 0,
        disagrees: 0,
        unresolved: 0,
        unreferenced: 0,
        invalid: 0,
      });
      expect(judged.worst).toBeNull();
      expect(judged.floor).toBe(DEFAULT_TOLERANCES.floorAbs);
    }
  });
});

describe("single entries", () => {
  it("are judged like any others", () => {
    const right = judge(block([[2]], [central(f64(2))], { outputs: [1], inputs: [1] }));
    expect(right.counts.agrees).toBe(1);
    const wrong = judge(block([[-2]], [central(f64(2))], { outputs: [1], inputs: [1] }));
    expect(wrong.counts.disagrees).toBe(1);
    expect(wrong.worst).toMatchObject({ row: 0, column: 0, error: 2, derivative: -2, reference: 2 });
  });

  it("without a reference are unreferenced, or invalid where not finite", () => {
    const { verdict, worst, resolution, best } = judge(block([[1, NaN]], []));
    expect([...verdict]).toEqual([3, 4]);
    expect([...resolution]).toEqual([NaN, NaN]);
    expect([...best.source]).toEqual([NO_SOURCE, NO_SOURCE]);
    expect(worst).toMatchObject({ row: 0, column: 1, error: NaN });
  });
});

describe("partial columns", () => {
  const derivative = [
    [1, 2, 3],
    [4, 5, 6],
  ];

  it("leave the others unreferenced, in any order", () => {
    const columns = Int32Array.from([2, 0]);
    const { verdict, best } = judge(block(derivative, [central(f64(3, 1, 6, 4), { columns })], { inputs: [1, 1, 1] }));
    expect([...best.value]).toEqual([1, NaN, 3, 4, NaN, 6]);
    expect([...best.source]).toEqual([0, NO_SOURCE, 0, 0, NO_SOURCE, 0]);
    expect([...verdict]).toEqual([0, 3, 0, 0, 3, 0]);
  });

  it("of several references make up the block together", () => {
    const first = central(f64(1, 2, 4, 5), { columns: Int32Array.from([0, 1]) });
    const second = reference("analytic", [{ step: null, values: f64(3, 6) }], { columns: Int32Array.from([2]) });
    const { best, counts } = judge(block(derivative, [first, second]));
    expect([...best.source]).toEqual([0, 0, 1, 0, 0, 1]);
    expect(counts.agrees).toBe(6);
    expect(best.kinds).toEqual(["modelled", "modelled"]);
  });

  it("may be none at all", () => {
    const { counts } = judge(block(derivative, [central(f64(), { columns: new Int32Array(0) })]));
    expect(counts.unreferenced).toBe(6);
  });

  it("take their own steps, and their own inputs' sizes", () => {
    const columns = Int32Array.from([2, 0]);
    const perColumn = (step: Float64Array) =>
      judge(
        block(derivative, [reference("forward-difference", [{ step, values: f64(3, 1, 6, 4) }], { columns })], {
          outputs: [1, 1],
          inputs: [1, 1, 1],
        }),
      ).best.uncertainty;
    const equal = perColumn(f64(1e-8, 1e-8));
    const coarse = perColumn(f64(1e-8, 1e-2));
    expect(coarse[2]).toBe(equal[2]);
    expect(coarse[0]).toBeGreaterThan(1000 * (equal[0] ?? NaN));
  });
});

describe("wrong shapes throw a RangeError that names the argument", () => {
  const good: BlockNumbers = block([[1, 2]], [central(f64(1, 2))], { outputs: [1], inputs: [1, 1] });
  const withReference = (change: Partial<ReferenceNumbers>): BlockNumbers => ({
    ...good,
    references: [{ ...central(f64(1, 2)), ...change }],
  });
  it.each<[string, BlockNumbers]>([
    ["rows", { ...good, rows: 1.5 }],
    ["rows", { ...good, rows: -1 }],
    ["columns", { ...good, columns: NaN }],
    ["derivative", { ...good, derivative: f64(1) }],
    ["outputValues", { ...good, outputValues: f64(1, 2) }],
    ["inputValues", { ...good, inputValues: f64(1) }],
    ["references", { ...good, references: new Array<ReferenceNumbers>(33).fill(central(f64(1, 2))) }],
    ["references[0].steps", withReference({ steps: [] })],
    ["references[0].steps", withReference({ steps: new Array(65).fill({ step: 1, values: f64(1, 2) }) })],
    ["references[0].steps[0].values", withReference({ steps: [{ step: 1, values: f64(1) }] })],
    ["references[0].steps[0].step", withReference({ steps: [{ step: f64(1), values: f64(1, 2) }] })],
    ["references[0].uncertainty", withReference({ uncertainty: f64(1) })],
    ["references[0].columns", withReference({ columns: Int32Array.from([0, 2]) })],
    ["references[0].columns", withReference({ columns: Int32Array.from([0, -1]) })],
    ["references[0].columns", withReference({ columns: Int32Array.from([1, 1]) })],
    ["references[0].steps[0].values", withReference({ columns: Int32Array.from([1]) })],
  ])("%s", (argument, wrong) => {
    for (const call of [() => judge(wrong), () => bestReference(wrong, DEFAULT_TOLERANCES)]) {
      expect(call).toThrow(RangeError);
      expect(call).toThrow(new RegExp(`^${argument.replaceAll(/[[\].]/g, "\\$&")}:`));
    }
  });
});

describe("relativeErrors", () => {
  it("are |a - r| over the larger of |r| and the floor, NaN without a number, finite where |a - r| overflows", () => {
    const a = f64(1, 0, 2, NaN, 1, 1.5e308, 0);
    const r = f64(1, 1e-9, -2, 1, NaN, -1.5e308, 0);
    expect([...relativeErrors(a, r, 1e-3, new Float64Array(7))]).toEqual([0, 1e-6, 2, NaN, NaN, 2, 0]);
    expect([...relativeErrors(f64(0, 1), f64(0, 0), 0, new Float64Array(2))]).toEqual([0, Infinity]);
  });

  it("name the array whose length differs", () => {
    expect(() => relativeErrors(f64(1), f64(), 1, new Float64Array(1))).toThrow(/^reference:/);
    expect(() => relativeErrors(f64(1), f64(1), 1, new Float64Array(2))).toThrow(/^out:/);
  });
});
