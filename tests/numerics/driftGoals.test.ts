/** How soon a climb is told and how seldom one is told in vain, by simulation with fixed seeds; and the logarithm. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { errorSteps } from "../../shared/numerics/drift/errorSteps.ts";
import { log10Steps } from "../../shared/numerics/drift/log10Steps.ts";
import { median } from "../../shared/numerics/robust/median.ts";
import { followDrift, lanesOf } from "./support/driftTrials.ts";

/** Simulations take seconds on a busy machine. */
const PATIENCE = 60_000;

describe("a climb of 0.1 decade a build", { timeout: PATIENCE }, () => {
  it.each([
    { noise: 0.05, start: 5 },
    { noise: 0.1, start: 5 },
    { noise: 0.1, start: 10 },
    { noise: 0.1, start: 20 },
    { noise: 0.1, start: 60 },
    { noise: 0.2, start: 60 },
  ])("under noise of $noise after $start builds is told within 12 builds in the median", ({ noise, start }) => {
    const lanes = lanesOf({ entries: 600, builds: start + 60, noise, slope: 0.1, start, seed: 7 });
    const { delays } = followDrift(lanes, start);
    expect(median(delays)).toBeLessThanOrEqual(12);
    expect(Math.max(...delays)).toBeLessThan(Infinity);
  });

  it("that begins with the first build is told as well", () => {
    const lanes = lanesOf({ entries: 600, builds: 60, noise: 0.1, slope: 0.1, start: 0, seed: 7 });
    const { delays } = followDrift(lanes, 0);
    expect(median(delays)).toBeLessThanOrEqual(20);
    expect(Math.max(...delays)).toBeLessThan(Infinity);
  });
});

describe("noise about a constant level", { timeout: PATIENCE }, () => {
  const cases = [0.05, 0.1, 0.2, 0.3].flatMap((noise) => [20, 60, 300, 1000].map((builds) => ({ noise, builds })));
  it.each(cases)("of $noise decades over $builds builds tells less than one climb or jump in 10,000", (trial) => {
    const entryBuilds = 120_000;
    const entries = entryBuilds / trial.builds;
    const { climbs, jumps } = followDrift(lanesOf({ ...trial, entries, slope: 0, start: 0, seed: 11 }), 0);
    expect(climbs).toBeLessThan(entryBuilds / 10_000);
    expect(jumps).toBeLessThan(entryBuilds / 10_000);
  });
});

describe("the logarithm in steps", { timeout: PATIENCE }, () => {
  it("is that of Math.log10 rounded or its neighbour, for every normal number", () => {
    const positive = fc.double({ min: 2 ** -1022, max: Number.MAX_VALUE, noNaN: true });
    fc.assert(
      fc.property(positive, (x) => {
        expect(Math.abs(log10Steps(x) - 1024 * Math.log10(x))).toBeLessThan(0.5 + 0.055);
      }),
      { numRuns: 20_000 },
    );
  });

  it("meets powers of ten and never falls as its number rises", () => {
    for (let k = -300; k <= 300; k += 10) expect(log10Steps(10 ** k)).toBe(1024 * k);
    for (let k = 1; k < 50_000; k += 1) {
      expect(log10Steps(1 + k / 50_000)).toBeGreaterThanOrEqual(log10Steps(1 + (k - 1) / 50_000));
    }
    expect(log10Steps(1)).toBe(0);
    expect(log10Steps(2 - 2 ** -52)).toBeLessThanOrEqual(log10Steps(2));
  });

  it("is taken of the error, the resolution or two units roundoff, whichever is largest, up to 31 decades", () => {
    expect(errorSteps(1e-5, 1e-9)).toBe(-5 * 1024);
    expect(errorSteps(1e-9, 1e-5)).toBe(-5 * 1024);
    expect(errorSteps(0, 0)).toBe(Math.round(1024 * Math.log10(2 ** -52)));
    expect(errorSteps(5e-324, -0)).toBe(errorSteps(0, 0));
    expect(errorSteps(1e300, 0)).toBe(31 * 1024);
    expect(errorSteps(Infinity, 0)).toBe(31 * 1024);
  });
});
