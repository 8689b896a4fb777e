/** The dot-product test against exact products, rounding bounds and what single precision allows. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { UNIT_ROUNDOFF } from "../../shared/numerics/roundoff.ts";
import { gamma } from "../../shared/numerics/probes/gamma.ts";
import { judgeDotProduct } from "../../shared/numerics/probes/judgeDotProduct.ts";
import { probeBlock } from "../../shared/numerics/probes/probeBlock.ts";
import { roundUp } from "../../shared/numerics/probes/roundUp.ts";
import type { DotProductProbe } from "../../shared/numerics/probes/types.ts";
import { absoluteUncertainty } from "../../shared/numerics/uncertainty/absoluteUncertainty.ts";
import { relativeError } from "../../shared/numerics/verdict/relativeError.ts";
import { integerBetween, mulberry32 } from "../support/random.ts";
import { anyFinite } from "./support/arbitraries.ts";
import { expectTable } from "./support/expectTable.ts";
import { readReference } from "./support/readReference.ts";

interface WholeNumbers {
  readonly matrix: readonly (readonly number[])[];
  readonly v: readonly number[];
  readonly w: readonly number[];
  readonly forward: readonly number[];
  readonly reverse: readonly number[];
  readonly dot: number;
  readonly absoluteDot: number;
  readonly dotWithWrongSign: number;
  readonly singlePrecision: { readonly precision: number; readonly discrepancyOfAnError: number };
}
const whole = readReference<WholeNumbers>("dot-product/wholeNumbers.json");

const dot = (a: readonly number[], b: readonly number[]) => a.reduce((sum, x, k) => sum + x * b[k]!, 0);
const absolute = (rows: readonly (readonly number[])[]) => rows.map((row) => row.map(Math.abs));
const times = (rows: readonly (readonly number[])[], v: readonly number[]) => rows.map((row) => dot(row, v));
const transposed = (rows: readonly (readonly number[])[]) => rows[0]!.map((_, j) => rows.map((row) => row[j]!));

const probe = (forward: number, reverse: number, more: Partial<DotProductProbe> = {}): DotProductProbe => ({
  forward,
  reverse,
  scale: null,
  precision: null,
  length: 8,
  ...more,
});

describe("of whole numbers", () => {
  const { matrix, v, w } = whole;
  it("forward and reverse are the same to the last bit", () => {
    expect(times(matrix, v)).toEqual(whole.forward);
    expect(times(transposed(matrix), w)).toEqual(whole.reverse);
    const [forward, reverse] = [dot(w, whole.forward), dot(whole.reverse, v)];
    const scale = dot(w.map(Math.abs), times(absolute(matrix), v.map(Math.abs)));
    expect([forward, reverse, scale]).toEqual([whole.dot, whole.dot, whole.absoluteDot]);
    const judged = judgeDotProduct(probe(forward, reverse, { scale }));
    expect(judged).toMatchObject({ verdict: "agrees", error: 0, floor: whole.absoluteDot, tolerance: 1e-10 });
    expect(judged.sentence).toBe("forward and reverse are the same to the last bit");
  });

  it("one wrong sign in the adjoint disagrees", () => {
    const judged = judgeDotProduct(probe(whole.dot, whole.dotWithWrongSign, { scale: whole.absoluteDot }));
    expect(judged.verdict).toBe("disagrees");
    expect(judged.error).toBe((whole.dot - whole.dotWithWrongSign) / whole.absoluteDot);
  });

  it("a discrepancy that single precision does not explain disagrees, one that it explains agrees", () => {
    const { precision, discrepancyOfAnError } = whole.singlePrecision;
    const single = { scale: whole.absoluteDot, precision };
    const off = (share: number, more = {}) =>
      judgeDotProduct(probe(whole.dot, whole.dot + share * whole.absoluteDot, { ...single, ...more })).verdict;
    expect(off(discrepancyOfAnError)).toBe("disagrees");
    expect(off(precision / 2)).toBe("agrees");
    // The same discrepancy in code that claims double precision is an error.
    expect(off(precision / 2, { precision: null })).toBe("disagrees");
  });
});

describe("rounding", () => {
  it("grows as gamma_n = n u / (1 - n u)", () => {
    const published: Readonly<Record<number, number>> = {
      1: 1.1102230246251568e-16,
      10: 1.1102230246251577e-15,
      100: 1.1102230246251688e-14,
      1000: 1.1102230246252799e-13,
      1000000: 1.110223024748416e-10,
    };
    expectTable(
      "gamma_n of binary64 (Higham, lemma 3.1; computed in two languages)",
      Object.entries(published).map(([n, expected]) => ({
        label: `n = ${n}`,
        actual: gamma(Number(n), UNIT_ROUNDOFF),
        expected,
        tolerance: 4e-16 * expected,
      })),
    );
    expect(gamma(1000, 2 ** -24)).toBeCloseTo(5.9608197700840286e-5, 18);
    expect(gamma(0, UNIT_ROUNDOFF)).toBe(0);
    expect(gamma(2 ** 53, UNIT_ROUNDOFF)).toBe(Infinity);
  });

  it("of 2,000 random matrices stays within the bound, and every one agrees", () => {
    const random = mulberry32(20260301);
    const number = () => (random() - 0.5) * 10 ** integerBetween(random, -3, 3);
    let largest = 0;
    for (let trial = 0; trial < 2000; trial += 1) {
      const [m, n] = [integerBetween(random, 1, 20), integerBetween(random, 1, 20)];
      const list = (length: number) => Array.from({ length }, number);
      const matrix = Array.from({ length: m }, () => list(n));
      const [v, w] = [list(n), list(m)];
      const [forward, reverse] = [dot(w, times(matrix, v)), dot(times(transposed(matrix), w), v)];
      const scale = dot(w.map(Math.abs), times(absolute(matrix), v.map(Math.abs)));
      const judged = judgeDotProduct(probe(forward, reverse, { scale, length: m + n }));
      expect(judged.verdict).toBe("agrees");
      largest = Math.max(largest, Math.abs(forward - reverse) / judged.uncertainty);
      const wrong = judgeDotProduct(probe(forward, reverse + 1e-9 * judged.floor, { scale, length: m + n }));
      expect(wrong.verdict).toBe("disagrees");
    }
    console.info(`2,000 random products used at most ${largest.toPrecision(2)} of the rounding bound`);
    expect(largest).toBeGreaterThan(0);
    expect(largest).toBeLessThanOrEqual(1);
  });

  it("never makes the tolerance smaller than itself, and leaves what it may explain open", () => {
    for (const length of [2, 1e3, 1e6, 1e9, 1e12]) {
      const judged = judgeDotProduct(probe(1, 1, { length }));
      expect(judged.tolerance).toBeGreaterThanOrEqual(gamma(length, UNIT_ROUNDOFF));
      expect(judged.verdict).toBe("agrees");
    }
    const rounding = gamma(1e9, UNIT_ROUNDOFF);
    expect(judgeDotProduct(probe(1, 1 - 5 * rounding, { length: 1e9 })).verdict).toBe("unresolved");
    expect(judgeDotProduct(probe(1, 1 - 7 * rounding, { length: 1e9 })).verdict).toBe("disagrees");
    expect(judgeDotProduct(probe(1, 1, { length: 2 ** 53 })).verdict).toBe("unresolved");
    expect(judgeDotProduct(probe(1, -1, { length: 2 ** 53 })).verdict).toBe("unresolved");
  });
});

describe("at the edges", () => {
  it("what is not finite is invalid", () => {
    for (const bad of [NaN, Infinity, -Infinity]) {
      expect(judgeDotProduct(probe(bad, 1)).verdict).toBe("invalid");
      expect(judgeDotProduct(probe(1, bad)).verdict).toBe("invalid");
    }
  });

  it("zeros agree, of either sign", () => {
    expect(judgeDotProduct(probe(0, -0))).toMatchObject({ verdict: "agrees", error: 0, uncertainty: 0 });
  });

  it("cancelled sums need their scale: without it what remains of them is compared", () => {
    expect(judgeDotProduct(probe(1e-16, -1e-16, { scale: 1 })).verdict).toBe("agrees");
    expect(judgeDotProduct(probe(1e-16, -1e-16))).toMatchObject({ verdict: "disagrees", assumed: true });
  });
});

const anyProbe = (number: fc.Arbitrary<number>) =>
  fc.record({
    forward: number,
    reverse: number,
    scale: fc.option(number.map(Math.abs), { nil: null }),
    precision: fc.constantFrom(null, 2 ** -23, 1),
    length: fc.constantFrom(0, 2, 1000, 2 ** 53),
  });

describe("for any numbers", () => {
  it("finite input gives no NaN, and the record tells the same", () => {
    fc.assert(
      fc.property(anyProbe(anyFinite), (posted) => {
        const judged = judgeDotProduct(posted);
        const { derivative, reference, uncertainty, floor, error } = judged;
        expect([derivative, reference, uncertainty, floor, error].filter(Number.isNaN)).toEqual([]);
        const block = probeBlock(judged, 1e-6).judged;
        expect(relativeError(derivative, reference, block.floor)).toBe(error);
        expect(absoluteUncertainty(block.resolution[0]!, reference, block.floor)).toBeGreaterThanOrEqual(
          floor === 0 ? 0 : uncertainty,
        );
      }),
      { numRuns: 2000 },
    );
  });

  it("a power of two as the unit, and which side is which, change no verdict", () => {
    const tame = fc.oneof(
      fc.double({ min: -1e3, max: 1e3, noNaN: true }).map((x) => (Math.abs(x) < 1e-100 ? 0 : x)),
      fc.constantFrom(1, 1 + 1e-11, 1 + 1e-9, 1 - 1e-10),
    );
    fc.assert(
      fc.property(anyProbe(tame), fc.integer({ min: -300, max: 300 }), (posted, exponent) => {
        const here = judgeDotProduct(posted).verdict;
        const scaled = (x: number) => x * 2 ** exponent;
        const { forward, reverse, scale } = posted;
        const there = { ...posted, forward: scaled(forward), reverse: scaled(reverse), scale: scale && scaled(scale) };
        expect(judgeDotProduct(there).verdict).toBe(here);
        expect(judgeDotProduct({ ...posted, forward: reverse, reverse: forward }).verdict).toBe(here);
      }),
    );
  });

  it("rounding up to binary32 gives the next number, never a smaller one", () => {
    fc.assert(
      fc.property(anyFinite.map(Math.abs), (value) => {
        expect(roundUp(value)).toBeGreaterThanOrEqual(value);
        expect(roundUp(value)).toBe(Math.fround(roundUp(value)));
      }),
    );
    expect([roundUp(1), roundUp(0), roundUp(Infinity)]).toEqual([1, 0, Infinity]);
    expect(roundUp(1 + 2 ** -24)).toBe(1 + 2 ** -23);
    expect(roundUp(NaN)).toBeNaN();
  });
});
