/** Facts of IEEE Std 754-2019 arithmetic that the judge rests on (reference/ieee-754/formats.json). */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { DEFAULT_PRECISION, UNIT_ROUNDOFF } from "../../shared/numerics/roundoff.ts";
import { neumaierSum } from "../../shared/numerics/sum/neumaierSum.ts";
import { absoluteUncertainty } from "../../shared/numerics/uncertainty/absoluteUncertainty.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { block } from "./support/blocks.ts";
import { readReference } from "./support/readReference.ts";
import { reference } from "./support/references.ts";

interface Formats {
  readonly binary32: Readonly<Record<"precision" | "smallest" | "largest", number>>;
  readonly binary64: Readonly<Record<"precision" | "unitRoundoff" | "smallest" | "largest", number>>;
  readonly vanishing: Readonly<Record<"x" | "largestVanishing" | "firstEffective", number>>;
  readonly sums: readonly { readonly values: readonly number[]; readonly sum: number }[];
  readonly harmonic: { readonly terms: number; readonly sum: number };
}

const { binary32, binary64, vanishing, sums, harmonic } = readReference<Formats>("ieee-754/formats.json");

describe("unit roundoff", () => {
  it("is 2^-p of binary64: half a unit in the last place of 1", () => {
    expect(UNIT_ROUNDOFF).toBe(2 ** -binary64.precision);
    expect(UNIT_ROUNDOFF).toBe(binary64.unitRoundoff);
    expect(1 + UNIT_ROUNDOFF).toBe(1);
    expect(1 + UNIT_ROUNDOFF * (1 + 2 * UNIT_ROUNDOFF)).toBeGreaterThan(1);
    expect(DEFAULT_PRECISION).toBe(Number.EPSILON);
  });

  it("bounds what binary32 keeps of a number by 2^-24", () => {
    expect(Math.abs(Math.fround(1 / 3) - 1 / 3) / (1 / 3)).toBeLessThanOrEqual(2 ** -binary32.precision);
    expect(Math.fround(1 + 2 ** -binary32.precision)).toBe(1);
  });

  it("makes small steps vanish: 3.5 + h is 3.5 up to h = 2.2e-16", () => {
    const { x, largestVanishing, firstEffective } = vanishing;
    expect(x + largestVanishing).toBe(x);
    expect(x + firstEffective).toBeGreaterThan(x);
  });
});

describe("neumaierSum", () => {
  it.each(sums)("of $values is $sum", ({ values, sum }) => expect(neumaierSum(values)).toBe(sum));

  it("of the harmonic series is correctly rounded", () => {
    expect(neumaierSum(Array.from({ length: harmonic.terms }, (_, k) => 1 / (k + 1)))).toBe(harmonic.sum);
  });

  it("does not depend on the order for numbers whose sum is exact, and equals that sum", () => {
    const whole = fc.array(fc.integer({ min: -(2 ** 40), max: 2 ** 40 }), { maxLength: 50 });
    fc.assert(
      fc.property(whole, (values) => {
        const exact = Number(values.reduce((sum, value) => sum + BigInt(value), 0n));
        expect(neumaierSum(values)).toBe(exact);
        expect(neumaierSum([...values].reverse())).toBe(exact);
      }),
    );
  });

  it("has its edges: empty, one, minus zero, NaN, infinity, overflow", () => {
    expect(neumaierSum([])).toBe(0);
    expect(neumaierSum([0.1])).toBe(0.1);
    expect(neumaierSum([-0])).toBe(0);
    expect(neumaierSum([1, NaN])).toBeNaN();
    expect(neumaierSum([1, Infinity, 2])).toBe(Infinity);
    expect(neumaierSum([Infinity, -Infinity])).toBeNaN();
    expect(neumaierSum([binary64.largest, binary64.largest])).toBe(Infinity);
    expect(neumaierSum([binary64.smallest, binary64.smallest])).toBe(2 * binary64.smallest);
  });
});

describe("resolution, kept as binary32", () => {
  const resolutionOf = (r: number, uncertainty: number): { resolution: number; floor: number } => {
    const stated = reference("analytic", [{ step: null, values: Float64Array.of(r) }], { uncertainty });
    const { resolution, floor } = judgeBlock(block([[r]], [stated]), DEFAULT_TOLERANCES);
    return { resolution: resolution[0] ?? NaN, floor };
  };

  it("gives back an absolute uncertainty that is never below the one judged with, by at most 2^-23", () => {
    const size = fc.double({ min: 1e-250, max: 1e250, noNaN: true });
    const ratio = fc.double({ min: 1e-30, max: 1e30, noNaN: true });
    fc.assert(
      fc.property(size, ratio, (r, share) => {
        const { resolution, floor } = resolutionOf(r, share * Math.max(r, 1e-12));
        const back = absoluteUncertainty(resolution, r, floor);
        const exact = share * Math.max(r, 1e-12);
        // Two roundings of binary64 on the way there and back.
        expect(back).toBeGreaterThanOrEqual(exact * (1 - 3 * UNIT_ROUNDOFF));
        expect(back).toBeLessThanOrEqual(exact * (1 + 2 ** -22));
      }),
    );
  });

  it("rounds up beyond its range: to the smallest number, and to infinity", () => {
    expect(resolutionOf(1, 1e-60).resolution).toBe(binary32.smallest);
    expect(resolutionOf(1, 0).resolution).toBe(0);
    expect(resolutionOf(1, binary32.largest * (1 + 1e-9)).resolution).toBe(Infinity);
    expect(resolutionOf(1, Infinity).resolution).toBe(Infinity);
  });

  it("has its edges: no reference is NaN, infinity stays infinity", () => {
    expect(absoluteUncertainty(NaN, 1, 1)).toBeNaN();
    expect(absoluteUncertainty(1, NaN, 1)).toBeNaN();
    expect(absoluteUncertainty(Infinity, 0, 0)).toBe(Infinity);
    expect(absoluteUncertainty(Infinity, NaN, 0)).toBeNaN();
    expect(absoluteUncertainty(0, 1e300, 1)).toBe(0);
    expect(absoluteUncertainty(0.5, -4, 1)).toBe(2);
    expect(absoluteUncertainty(0.5, 1e-5, 1)).toBe(0.5);
  });
});
