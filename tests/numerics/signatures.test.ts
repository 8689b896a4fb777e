/** Planted mistakes in the published problems: each is named for what it is, and a right block never. */
import { describe, expect, it } from "vitest";
import { cleanTrials, faultTrials } from "./support/signatures/faultTrials.ts";

describe("right derivatives of the published problems", () => {
  it("have no signature, whatever the reference", () => {
    const clean = cleanTrials();
    expect(clean.length).toBeGreaterThan(700);
    expect(clean.filter(({ named }) => named.length > 0).map(({ name }) => name)).toEqual([]);
  });
});

describe("planted mistakes", () => {
  const trials = faultTrials(41, 8);
  const kinds = new Map(trials.map(({ plant }) => [plant.kind, plant.code]));

  it("are of many kinds, dense and sparse", () => {
    expect(trials.length).toBeGreaterThanOrEqual(400);
    expect(kinds.size).toBeGreaterThanOrEqual(12);
    expect(trials.filter(({ sparse }) => sparse).length).toBeGreaterThan(100);
  });

  it("are named for what they are, with their place and factor or order", () => {
    const right = trials.filter(({ outcome }) => outcome === "right").length;
    const wrong = trials.filter(({ outcome }) => outcome === "wrong");
    expect(right / trials.length).toBeGreaterThanOrEqual(0.97);
    expect(
      wrong.length / trials.length,
      wrong.map(({ name, plant }) => `${plant.kind} in ${name}`).join("\n"),
    ).toBeLessThanOrEqual(0.01);
  });

  it.each([...kinds.keys()])("of the kind %s are named right four times out of five at least", (kind) => {
    const own = trials.filter(({ plant }) => plant.kind === kind);
    const right = own.filter(({ outcome }) => outcome === "right").length;
    expect(right).toBeGreaterThan(0);
    expect(right / own.length).toBeGreaterThanOrEqual(0.8);
  });
});
