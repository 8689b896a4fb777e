/** What holds for every block, whatever its numbers. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import { blockMotion } from "../../shared/numerics/motion/blockMotion.ts";
import { bestReference } from "../../shared/numerics/reference/bestReference.ts";
import type { BlockNumbers, JudgedBlock, MotionSide } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { anyFinite, anyNumber, arbitraryBlock, tameNumber } from "./support/arbitraries.ts";

/** The seed is fixed, so that a run can be repeated; 20,000 blocks of other seeds were tried. */
const RUNS = { numRuns: 400, seed: 20251201 };
const judge = (block: BlockNumbers) => judgeBlock(block, DEFAULT_TOLERANCES);

function sideOf(block: BlockNumbers, judged: JudgedBlock): MotionSide & { readonly verdict: Uint8Array } {
  const { best, resolution, floor, verdict } = judged;
  return {
    derivative: block.derivative,
    reference: best.value,
    resolution,
    floor,
    outputValues: block.outputValues,
    verdict,
  };
}

/** The same block with its rows and columns in another order, given by indices into the old ones. */
function permuted(block: BlockNumbers, rowOrder: readonly number[], columnOrder: readonly number[]): BlockNumbers {
  const plane = (values: Float64Array) =>
    Float64Array.from(rowOrder.flatMap((i) => columnOrder.map((j) => values[i * block.columns + j] ?? NaN)));
  const vector = (values: Float64Array | null, order: readonly number[]) =>
    values === null ? null : Float64Array.from(order, (k) => values[k] ?? NaN);
  return {
    ...block,
    outputValues: vector(block.outputValues, rowOrder),
    inputValues: vector(block.inputValues, columnOrder),
    derivative: plane(block.derivative),
    references: block.references.map((each) => ({
      ...each,
      steps: each.steps.map((step) => ({ ...step, values: plane(step.values) })),
    })),
  };
}

describe("judging any block", () => {
  it("gives every entry one verdict, and counts that sum to the entries", () => {
    fc.assert(
      fc.property(arbitraryBlock(anyNumber), (block) => {
        const { verdict, counts } = judge(block);
        const found = VERDICTS.map((_, code) => verdict.filter((each) => each === code).length);
        expect(VERDICTS.map((name) => counts[name])).toEqual(found);
        expect(found.reduce((sum, count) => sum + count, 0)).toBe(block.rows * block.columns);
        expect(counts.entries).toBe(block.rows * block.columns);
      }),
      RUNS,
    );
  });

  it("makes no NaN of finite numbers: only what has no reference is NaN", () => {
    fc.assert(
      fc.property(arbitraryBlock(anyFinite), (block) => {
        const { best, resolution, floor, worst, counts } = judge(block);
        const planes = [best.value, best.uncertainty, resolution];
        const referenced = block.references.length > 0;
        for (const plane of planes) expect([...plane].some(Number.isNaN)).toBe(!referenced && block.rows > 0);
        expect([...best.uncertainty].every((u) => !(u < 0))).toBe(true);
        expect(floor).toBeGreaterThan(0);
        expect(counts.invalid).toBe(0);
        if (worst !== null) expect(Number.isNaN(worst.error)).toBe(!referenced);
      }),
      RUNS,
    );
  });

  it("gives the same answer each time, and leaves the block alone", () => {
    fc.assert(
      fc.property(arbitraryBlock(anyNumber), (block) => {
        const copy = structuredClone(block);
        const first = judge(block);
        expect(judge(block)).toEqual(first);
        expect(block).toEqual(copy);
        expect(bestReference(block, DEFAULT_TOLERANCES)).toEqual({
          ...first.best,
          uncertainty: first.best.uncertainty,
        });
      }),
      RUNS,
    );
  });

  it("does not depend on the order of rows and columns", () => {
    const withOrders = arbitraryBlock(tameNumber).chain((block) =>
      fc.tuple(
        fc.constant(block),
        fc.shuffledSubarray([...Array(block.rows).keys()], { minLength: block.rows }),
        fc.shuffledSubarray([...Array(block.columns).keys()], { minLength: block.columns }),
      ),
    );
    fc.assert(
      fc.property(withOrders, ([block, rowOrder, columnOrder]) => {
        const { verdict } = judge(block);
        const moved = judge(permuted(block, rowOrder, columnOrder));
        const expected = rowOrder.flatMap((i) => columnOrder.map((j) => verdict[i * block.columns + j]));
        expect([...moved.verdict]).toEqual(expected);
      }),
      RUNS,
    );
  });

  it("does not depend on the unit of the outputs, by powers of two that scale the absolute floor along", () => {
    fc.assert(
      fc.property(arbitraryBlock(tameNumber), fc.integer({ min: -40, max: 40 }), (original, exponent) => {
        // Without output values |F| is taken as 1 whatever the unit, and a stated U has a unit of its own.
        const block = {
          ...original,
          outputValues: original.outputValues ?? new Float64Array(original.rows).fill(1),
          references: original.references.map((each) => ({ ...each, uncertainty: null })),
        };
        const factor = 2 ** exponent;
        const plane = (values: Float64Array) => values.map((value) => value * factor);
        const scaled = {
          ...block,
          outputValues: plane(block.outputValues),
          derivative: plane(block.derivative),
          references: block.references.map((each) => ({
            ...each,
            steps: each.steps.map((step) => ({ ...step, values: plane(step.values) })),
          })),
        };
        const floorAbs = DEFAULT_TOLERANCES.floorAbs * factor;
        expect(judgeBlock(scaled, { ...DEFAULT_TOLERANCES, floorAbs }).verdict).toEqual(judge(block).verdict);
      }),
      RUNS,
    );
  });

  it("never lets a looser tolerance turn agreement into anything else, nor make an accusation", () => {
    fc.assert(
      fc.property(arbitraryBlock(anyFinite), fc.double({ min: 1, max: 1e6, noNaN: true }), (block, looser) => {
        const strict = judge(block).verdict;
        const loose = judgeBlock(block, { ...DEFAULT_TOLERANCES, rtol: DEFAULT_TOLERANCES.rtol * looser }).verdict;
        strict.forEach((code, k) => {
          if (VERDICTS[code] === "agrees") expect(VERDICTS[loose[k] ?? -1]).toBe("agrees");
          if (VERDICTS[loose[k] ?? -1] === "disagrees") expect(VERDICTS[code]).toBe("disagrees");
        });
      }),
      RUNS,
    );
  });

  it("never calls a derivative wrong that is the chosen reference itself", () => {
    fc.assert(
      fc.property(arbitraryBlock(anyFinite), (block) => {
        const { best } = judge(block);
        const copied = judge({ ...block, derivative: best.value.map((r) => (Number.isNaN(r) ? 0 : r)) });
        expect(copied.counts).toMatchObject({ disagrees: 0, invalid: 0 });
      }),
      RUNS,
    );
  });
});

describe("motion between any two builds", () => {
  it("is still against itself", () => {
    fc.assert(
      fc.property(arbitraryBlock(anyNumber), (block) => {
        const side = sideOf(block, judge(block));
        const { counts } = blockMotion(side, side, block.rows, block.columns);
        expect(counts).toEqual({
          still: block.rows * block.columns,
          together: 0,
          "derivative-only": 0,
          "model-only": 0,
          apart: 0,
        });
      }),
      RUNS,
    );
  });

  it("gives every entry one motion, and counts that sum to the entries", () => {
    const pair = arbitraryBlock(anyNumber).chain((now) =>
      fc.tuple(
        fc.constant(now),
        fc.array(anyNumber, { minLength: now.derivative.length, maxLength: now.derivative.length }),
      ),
    );
    fc.assert(
      fc.property(pair, ([now, other]) => {
        const before = { ...now, derivative: Float64Array.from(other) };
        const { motion, counts } = blockMotion(
          sideOf(now, judge(now)),
          sideOf(before, judge(before)),
          now.rows,
          now.columns,
        );
        expect(Object.values(counts).reduce((sum: number, count: number) => sum + count, 0)).toBe(motion.length);
        expect(Math.max(0, ...motion)).toBeLessThan(Object.keys(counts).length);
      }),
      RUNS,
    );
  });
});
