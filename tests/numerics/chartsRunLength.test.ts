/** Average run length of the CUSUM against published tables, own quadrature, the approximation and a simulation. */
import { describe, expect, it } from "vitest";
import type { CusumDesign } from "../../shared/numerics/charts/cusumAverageRunLength.ts";
import { cusumAverageRunLength } from "../../shared/numerics/charts/cusumAverageRunLength.ts";
import { normalProbability } from "../../shared/numerics/charts/normalProbability.ts";
import { tabularCusum } from "../../shared/numerics/charts/tabularCusum.ts";
import { expectTable } from "./support/expectTable.ts";
import { normals } from "./support/normals.ts";
import { readReference } from "./support/readReference.ts";

interface TwoSidedTable {
  readonly k: number;
  readonly headStart: number;
  readonly table: { readonly shift: number; readonly h4: number; readonly h5: number; readonly h4HeadStart: number }[];
}
interface Length {
  readonly h: number;
  readonly shift: number;
  readonly length: number;
}
interface Quadrature {
  readonly k: number;
  readonly oneSided: Length[];
  readonly twoSided: Length[];
  readonly markov: { readonly h: number; readonly states: number; readonly length: number }[];
}

const STATES = 100;
const published = readReference<TwoSidedTable>("cusum-run-lengths/two-sided.json");
const quadrature = readReference<Quadrature>("cusum-run-lengths/integral-equation.json");
const oneSided = readReference<{ readonly table: (Length & { readonly k: number })[] }>(
  "cusum-run-lengths/one-sided.json",
);

const chain = (design: Omit<CusumDesign, "states">): number => cusumAverageRunLength({ states: STATES, ...design });

/** Both sides from 0: 1/L = 1/L+ + 1/L-. */
function twoSided(k: number, h: number, shift: number): number {
  return 1 / (1 / chain({ k, h, shift }) + 1 / chain({ k, h, shift: -shift }));
}

/** Both sides from a head start: the shares of the signals of each side, as both cannot be high at once. */
function twoSidedFrom(k: number, h: number, shift: number, headStart: number): number {
  const [up, down] = [chain({ k, h, shift }), chain({ k, h, shift: -shift })];
  const [upFrom, downFrom] = [chain({ k, h, shift, headStart }), chain({ k, h, shift: -shift, headStart })];
  return (upFrom * down + downFrom * up - up * down) / (up + down);
}

/** Half a unit of the last of so many significant digits. */
function halfUnit(value: number, digits: number): number {
  return 0.5 * 10 ** (Math.floor(Math.log10(value)) - digits + 1);
}

function row(label: string, actual: number, expected: number, digits: number): Parameters<typeof expectTable>[1][0] {
  return { label, actual, expected, tolerance: halfUnit(expected, digits) + 1e-3 * expected };
}

describe("average run length of the tabular CUSUM", () => {
  it("is that of the published table, with and without head start", () => {
    const { k, headStart, table } = published;
    expectTable(
      "two-sided run lengths",
      table.flatMap(({ shift, h4, h5, h4HeadStart }) => [
        row(`h 4, shift ${shift}`, twoSided(k, 4, shift), h4, 3),
        row(`h 5, shift ${shift}`, twoSided(k, 5, shift), h5, 3),
        row(`h 4, shift ${shift}, head start`, twoSidedFrom(k, 4, shift, headStart), h4HeadStart, 3),
      ]),
    );
  });

  it("is that of the integral equation", () => {
    const { k, oneSided: single, twoSided: both } = quadrature;
    expectTable("quadrature", [
      ...single.map(({ h, shift, length }) => row(`one side, h ${h}`, chain({ k, h, shift }), length, 9)),
      ...both.map(({ h, shift, length }) => row(`both, h ${h}, ${shift}`, twoSided(k, h, shift), length, 8)),
    ]);
  });

  it("is that of the chain with as many states as others used", () => {
    expectTable(
      "Markov chain",
      quadrature.markov.map(({ h, states, length }) => ({
        label: `${states} states`,
        actual: cusumAverageRunLength({ k: quadrature.k, h, shift: 0, states }),
        expected: length,
        tolerance: 5e-4,
      })),
    );
  });

  it("is that of Brook and Evans and of Vance", () => {
    expectTable(
      "one-sided run lengths",
      oneSided.table.map(({ k, h, shift, length }) => ({
        label: `k ${k}, h ${h}, shift ${shift}`,
        actual: cusumAverageRunLength({ k, h, shift, states: shift < 0 ? 300 : STATES }),
        expected: length,
        tolerance: halfUnit(length, 5) + 1e-3 * length,
      })),
    );
  });

  it("lies within 1 % of the approximation of Siegmund", () => {
    // D. Siegmund, Sequential Analysis, Springer, 1985: (exp(-2 D b) + 2 D b - 1)/(2 D^2), D = shift - k, b = h + 1.166.
    const siegmund = (h: number, drift: number): number => {
      const b = h + 1.166;
      return (Math.exp(-2 * drift * b) + 2 * drift * b - 1) / (2 * drift ** 2);
    };
    for (const h of [4, 5]) {
      const length = siegmund(h, -0.5) / 2;
      expect(Math.abs(twoSided(0.5, h, 0) / length - 1)).toBeLessThan(0.01);
    }
    expect(siegmund(4, -0.5) / 2).toBeCloseTo(169.0466, 4);
  });

  it.each([
    { h: 4, shift: 0 },
    { h: 5, shift: 1 },
  ])("is that of a simulation within four standard errors: $h, $shift", ({ h, shift }) => {
    const normal = normals(20_261_201);
    const runs = 2000;
    const lengths = Array.from({ length: runs }, () => simulated(normal, h, shift));
    const mean = lengths.reduce((sum, length) => sum + length, 0) / runs;
    const variance = lengths.reduce((sum, length) => sum + (length - mean) ** 2, 0) / (runs - 1);
    expect(Math.abs(mean - twoSided(0.5, h, shift))).toBeLessThan(4 * Math.sqrt(variance / runs));
  });

  it("grows with h and k, and falls with the shift and a head start", () => {
    const base = chain({ k: 0.5, h: 4, shift: 0.5 });
    expect(chain({ k: 0.5, h: 4.1, shift: 0.5 })).toBeGreaterThan(base);
    expect(chain({ k: 0.6, h: 4, shift: 0.5 })).toBeGreaterThan(base);
    expect(chain({ k: 0.5, h: 4, shift: 0.6 })).toBeLessThan(base);
    expect(chain({ k: 0.5, h: 4, shift: 0.5, headStart: 2 })).toBeLessThan(base);
    expect(chain({ k: 0.5, h: 4, shift: 100 })).toBe(1);
  });

  it("refuses what is out of its domain", () => {
    const design = { k: 0.5, h: 4, shift: 0, states: 10 };
    expect(() => cusumAverageRunLength({ ...design, h: 0 })).toThrow(/^h: 0/);
    expect(() => cusumAverageRunLength({ ...design, k: NaN })).toThrow(/^k: NaN/);
    expect(() => cusumAverageRunLength({ ...design, shift: Infinity })).toThrow(/^shift: /);
    expect(() => cusumAverageRunLength({ ...design, headStart: 5 })).toThrow(/^headStart: 5/);
    expect(() => cusumAverageRunLength({ ...design, states: 1 })).toThrow(/^states: 1/);
  });
});

describe("normal probability", () => {
  it("has the known quantiles and tails", () => {
    // From memory, verified at 30 digits.
    const known: readonly (readonly [number, number])[] = [
      [0, 0.5],
      [0.674489750196081743, 0.75],
      [1, 0.841344746068542949],
      [-2, 0.0227501319481792072],
      [3, 0.998650101968369905],
      [-6, 9.86587645037698141e-10],
    ];
    expectTable(
      "normal probability",
      known.map(([x, p]) => ({ label: `${x}`, actual: normalProbability(x), expected: p, tolerance: 1e-15 })),
    );
  });

  it("takes NaN, infinities, zeros and the far tails", () => {
    expect(normalProbability(NaN)).toBeNaN();
    expect(normalProbability(Infinity)).toBe(1);
    expect(normalProbability(-Infinity)).toBe(0);
    expect(normalProbability(-0)).toBe(0.5);
    expect(normalProbability(5e-324)).toBe(0.5);
    expect(normalProbability(-1e300)).toBe(0);
  });
});

/** Values until a two-sided chart signals; series are lengthened until it does. */
function simulated(normal: () => number, h: number, shift: number): number {
  const x: number[] = [];
  for (;;) {
    for (let i = x.length + 64; x.length < i;) x.push(normal() + shift);
    const { signal } = tabularCusum(x, { target: 0, k: 0.5, h });
    if (signal >= 0) return signal + 1;
  }
}
