/** Median and median absolute deviation against published examples, and the allocation-free form against the plain one. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { median } from "../../shared/numerics/robust/median.ts";
import { medianAbsoluteDeviation } from "../../shared/numerics/robust/medianAbsoluteDeviation.ts";
import { sortedDeviation } from "../../shared/numerics/robust/sortedDeviation.ts";
import { anyNumber } from "./support/arbitraries.ts";
import { expectTable } from "./support/expectTable.ts";
import { readReference } from "./support/readReference.ts";

interface Sample {
  readonly x: number[];
  readonly median: number;
  readonly mad: number;
}
interface Leys extends Sample {
  readonly limits: number[];
  readonly factor: number;
  readonly outliers: number[];
}
interface Uranium extends Sample {
  readonly scores: number[];
  readonly outliers: number[];
}

const leys = readReference<Leys>("robust/leys.json");
const uranium = readReference<Uranium>("nist-handbook/uranium.json");
const replicates = readReference<Sample>("robust/replicates.json");
const ascending = (x: readonly number[]): number[] => [...x].sort((a, b) => a - b);
const whole = fc.array(fc.integer({ min: -16_384, max: 31_744 }), { minLength: 1, maxLength: 20 });

describe("median and median absolute deviation", () => {
  it("are those of the published examples", () => {
    const rows = Object.entries({ leys, uranium, replicates }).flatMap(([name, set]) => [
      { label: `${name} median`, actual: median(set.x), expected: set.median, tolerance: 1e-12 },
      { label: `${name} MAD`, actual: medianAbsoluteDeviation(set.x), expected: set.mad, tolerance: 1e-12 },
      {
        label: `${name} sorted`,
        actual: sortedDeviation(ascending(set.x), 0, set.x.length),
        expected: set.mad,
        tolerance: 1e-12,
      },
    ]);
    expectTable("median and MAD", rows);
  });

  it("give the limits of Leys et al. and their outlier", () => {
    const centre = median(leys.x);
    const width = leys.factor * 1.4826 * medianAbsoluteDeviation(leys.x);
    expectTable("limits", [
      { label: "lower", actual: centre - width, expected: leys.limits[0] ?? NaN, tolerance: 0.005 },
      { label: "upper", actual: centre + width, expected: leys.limits[1] ?? NaN, tolerance: 0.005 },
    ]);
    expect(leys.x.filter((x) => Math.abs(x - centre) > width)).toEqual(leys.outliers);
  });

  it("give the modified z-scores of the uranium data", () => {
    const centre = median(uranium.x);
    const mad = medianAbsoluteDeviation(uranium.x);
    const scores = uranium.x.map((x) => (0.6745 * (x - centre)) / mad);
    const rows = scores.map((actual, k) => ({
      label: `${k}`,
      actual,
      expected: uranium.scores[k] ?? NaN,
      tolerance: 1e-9,
    }));
    expectTable("modified z", rows);
    expect(uranium.x.filter((_, k) => Math.abs(scores[k] ?? NaN) > 3.5)).toEqual(uranium.outliers);
  });
});

describe("edges", () => {
  it("answers NaN for nothing and for a NaN among the numbers", () => {
    for (const x of [[], [NaN], [1, NaN, 2], [NaN, 1, 2, 3, 4]]) {
      expect(median(x)).toBeNaN();
      expect(medianAbsoluteDeviation(x)).toBeNaN();
    }
    expect(sortedDeviation([], 0, 0)).toBeNaN();
  });

  it("takes one number, infinities, the smallest and the largest", () => {
    expect(median([7])).toBe(7);
    expect(medianAbsoluteDeviation([7])).toBe(0);
    expect(sortedDeviation([7], 0, 1)).toBe(0);
    expect(median([-0])).toBe(-0);
    expect(median([Infinity, Infinity])).toBe(Infinity);
    expect(median([-Infinity, 1, Infinity])).toBe(1);
    expect(median([Number.MAX_VALUE, Number.MAX_VALUE / 2])).toBe(Number.MAX_VALUE * 0.75);
    expect(median([5e-324, 5e-324, 0])).toBe(5e-324);
    expect(median([1e300, -1e300])).toBe(0);
  });
});

describe("properties", () => {
  it("has as many numbers below the median as above, whatever the order", () => {
    fc.assert(
      fc.property(fc.array(anyNumber, { minLength: 1, maxLength: 30 }), (x) => {
        const centre = median(x);
        expect(median([...x].reverse())).toBe(centre);
        if (x.some(Number.isNaN)) {
          expect(centre).toBeNaN();
        } else if (Number.isNaN(centre)) {
          expect(x).toEqual(expect.arrayContaining([Infinity, -Infinity]));
        } else {
          expect(x.filter((value) => value < centre).length).toBeLessThanOrEqual(x.length / 2);
          expect(x.filter((value) => value > centre).length).toBeLessThanOrEqual(x.length / 2);
        }
      }),
    );
  });

  it("finds the deviation of a sorted window as the plain function does", () => {
    fc.assert(
      fc.property(whole, fc.integer({ min: 0, max: 5 }), (x, from) => {
        const window = Int16Array.from([...Array<number>(from).fill(9), ...ascending(x), 9]);
        expect(sortedDeviation(window, from, x.length)).toBe(medianAbsoluteDeviation(x));
      }),
    );
  });
});
