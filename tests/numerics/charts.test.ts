/** CUSUM and EWMA charts against the worked examples of the NIST/SEMATECH e-Handbook and a published table. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { ewma } from "../../shared/numerics/charts/ewma.ts";
import { tabularCusum } from "../../shared/numerics/charts/tabularCusum.ts";
import type { TableRow } from "./support/expectTable.ts";
import { expectTable } from "./support/expectTable.ts";
import { readReference } from "./support/readReference.ts";

interface CusumExample {
  readonly target: number;
  readonly k: number;
  readonly h: number;
  readonly x: number[];
  readonly upper: number[];
  readonly lower: number[];
}
interface EwmaExample {
  readonly start: number;
  readonly lambda: number;
  readonly sigma: number;
  readonly factor: number;
  readonly x: number[];
  readonly values: number[];
  readonly limits: number[];
}

const nist = readReference<CusumExample & { readonly firstSignalGroup: number }>("nist-handbook/cusum.json");
const calm = readReference<CusumExample>("montgomery-runger/cusum.json");
const average = readReference<EwmaExample>("nist-handbook/ewma.json");

function rowsOf(name: string, actual: Float64Array, expected: readonly number[], tolerance: number): TableRow[] {
  return expected.map((value, k) => ({
    label: `${name} ${k + 1}`,
    actual: actual[k] ?? NaN,
    expected: value,
    tolerance,
  }));
}

describe("tabular CUSUM", () => {
  it("gives the sums of e-Handbook 6.3.2.3 and signals at group 14", () => {
    const chart = tabularCusum(nist.x, nist);
    expectTable("e-Handbook CUSUM", [
      ...rowsOf("upper", chart.upper, nist.upper, 0.005 + 1e-9),
      ...rowsOf("lower", chart.lower, nist.lower, 0.005 + 1e-9),
    ]);
    expect(chart.signal + 1).toBe(nist.firstSignalGroup);
  });

  it("gives the sums of Montgomery and Runger and no signal", () => {
    const chart = tabularCusum(calm.x, calm);
    expectTable("second CUSUM", [
      ...rowsOf("upper", chart.upper, calm.upper, 1e-9),
      ...rowsOf("lower", chart.lower, calm.lower, 1e-9),
    ]);
    expect(chart.signal).toBe(-1);
  });

  it("takes nothing, one value, NaN and infinities", () => {
    const design = { target: 0, k: 0.5, h: 4 };
    expect(tabularCusum([], design)).toEqual({ upper: new Float64Array(), lower: new Float64Array(), signal: -1 });
    expect(tabularCusum([5], design).signal).toBe(0);
    expect([...tabularCusum([1, NaN, 1], design).upper]).toEqual([0.5, 0.5, 1]);
    const infinite = tabularCusum([1, Infinity, -Infinity, 1], design);
    expect([...infinite.upper]).toEqual([0.5, Infinity, Infinity, Infinity]);
    expect([...infinite.lower]).toEqual([0, 0, Infinity, Infinity]);
    expect([...tabularCusum([5e-324, -0], { target: 0, k: 0, h: 0 }).upper]).toEqual([5e-324, 5e-324]);
    expect([...tabularCusum([1e308, 1e308], { target: -1e308, k: 0, h: 4 }).upper]).toEqual([Infinity, Infinity]);
  });

  it("refuses k and h that are none", () => {
    expect(() => tabularCusum([1], { target: 0, k: -1, h: 4 })).toThrow(/^k: -1/);
    expect(() => tabularCusum([1], { target: 0, k: 0.5, h: NaN })).toThrow(/^h: NaN/);
  });

  it("has its sides exchanged when the series is mirrored", () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true })), (x) => {
        const design = { target: 0, k: 0.5, h: 4 };
        const chart = tabularCusum(x, design);
        const mirrored = tabularCusum(
          x.map((value) => -value),
          design,
        );
        expect(mirrored.lower).toEqual(chart.upper);
        expect(mirrored.upper).toEqual(chart.lower);
        expect(mirrored.signal).toBe(chart.signal);
      }),
    );
  });
});

describe("EWMA", () => {
  it("gives the averages and limits of e-Handbook 6.3.2.4, all inside", () => {
    const chart = ewma(average.x, average);
    expectTable("e-Handbook EWMA", [
      ...rowsOf("average", chart.values, average.values, 0.005 + 1e-9),
      { label: "lower", actual: average.start - chart.width, expected: average.limits[0] ?? NaN, tolerance: 1e-4 },
      { label: "upper", actual: average.start + chart.width, expected: average.limits[1] ?? NaN, tolerance: 1e-4 },
    ]);
    expect(chart.signal).toBe(-1);
  });

  it("has limits that grow from lambda times the factor to their width", () => {
    const { halfWidths, width } = ewma(new Float64Array(200), { start: 0, lambda: 0.3, sigma: 2, factor: 3 });
    expect(halfWidths[0]).toBeCloseTo(0.3 * 3 * 2, 12);
    expect([...halfWidths].every((half, k) => k === 0 || half >= (halfWidths[k - 1] ?? NaN))).toBe(true);
    expect(halfWidths[199]).toBeCloseTo(width, 12);
  });

  it("is the series itself at lambda 1, and signals where that leaves the limits", () => {
    const chart = ewma([1, -2, NaN, 3.5, 0], { start: 0, lambda: 1, sigma: 1, factor: 3 });
    expect([...chart.values]).toEqual([1, -2, -2, 3.5, 0]);
    expect(chart.signal).toBe(3);
    expect(ewma([], { start: 0, lambda: 1, sigma: 1, factor: 3 }).signal).toBe(-1);
  });

  it("refuses what is out of its domain", () => {
    const design = { start: 0, lambda: 0.2, sigma: 1, factor: 3 };
    for (const lambda of [0, -0.1, 1.1, NaN]) expect(() => ewma([1], { ...design, lambda })).toThrow(/^lambda: /);
    expect(() => ewma([1], { ...design, sigma: -1 })).toThrow(/^sigma: -1/);
    expect(() => ewma([1], { ...design, factor: NaN })).toThrow(/^factor: NaN/);
  });

  it("stays between the start and the values", () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1 }),
        fc.double({ min: 0.01, max: 1, noNaN: true }),
        (x, lambda) => {
          const { values } = ewma(x, { start: 0, lambda, sigma: 1, factor: 3 });
          const slack = 1e-9 * Math.max(...x.map(Math.abs));
          for (const value of values) {
            expect(value).toBeLessThanOrEqual(Math.max(0, ...x) + slack);
            expect(value).toBeGreaterThanOrEqual(Math.min(0, ...x) - slack);
          }
        },
      ),
    );
  });
});
