import { describe, expect, it } from "vitest";
import { FIRST_CODE } from "../../../scripts/demo/code.ts";
import type { Code } from "../../../scripts/demo/code.ts";
import { byCentralDifferences, byComplexSteps, byDualNumbers, outputs } from "../../../scripts/demo/jacobians.ts";
import type { Rows } from "../../../scripts/demo/jacobians.ts";
import { MODELS } from "../../../scripts/demo/models/index.ts";
import type { DemoModel } from "../../../scripts/demo/models/model.ts";

/** Code bases whose derivatives were changed together with their models. */
const SOUND: Readonly<Record<string, Code>> = {
  first: FIRST_CODE,
  later: { ...FIRST_CODE, flowSpeed: 2.4, stallExponent: 6, tipLoss: true, wakeGrowth: 0.031, cableCost: 436 },
};

const models: readonly DemoModel[] = MODELS;
const cases = models.flatMap((model) =>
  Object.entries(SOUND).map(([when, code]) => ({
    name: `${model.model} ${model.output.name}, ${when} code`,
    model,
    code,
  })),
);

/** Largest |a - b| over max(|b|, a thousandth of the largest |b|). */
function distance(a: Rows, b: Rows): number {
  const floor = 1e-3 * Math.max(...b.flat().map(Math.abs));
  return Math.max(
    ...b.flatMap((row, r) => row.map((value, c) => Math.abs(a[r]![c]! - value) / Math.max(Math.abs(value), floor))),
  );
}

describe("the demo's models", () => {
  it.each(cases)("$name: the hand-written derivative is that of dual numbers", ({ model, code }) => {
    const exact = byDualNumbers(model, code);
    const delivered = model.derivative?.(model.input.values, code) ?? exact;
    expect(delivered.map((row) => row.length)).toEqual(model.output.elements.map(() => model.input.elements.length));
    // The mooring's own iteration ends at a relative error of about 1e-12.
    expect(distance(delivered, exact)).toBeLessThan(1e-11);
  });

  it.each(cases)("$name: complex steps and central differences know the same derivative", ({ model, code }) => {
    const exact = byDualNumbers(model, code);
    expect(distance(byComplexSteps(model, code, 1e-20), exact)).toBeLessThan(1e-11);
    const steps = model.input.values.map((value) => 1e-6 * Math.max(Math.abs(value), 0.1));
    expect(distance(byCentralDifferences(model, code, steps), exact)).toBeLessThan(1e-4);
  });

  it("evaluates to the same numbers each time, all of them finite", () => {
    for (const model of models) {
      const values = outputs(model, FIRST_CODE);
      expect(values.every(Number.isFinite)).toBe(true);
      expect(outputs(model, FIRST_CODE)).toEqual(values);
    }
  });

  it("names every element once, and every model as the scenario does", () => {
    for (const { input, output } of models) {
      expect(new Set(input.elements).size).toBe(input.elements.length);
      expect(new Set(output.elements).size).toBe(output.elements.length);
      expect(input.values.length).toBe(input.elements.length);
    }
    expect(new Set(models.map((model) => model.model))).toEqual(
      new Set(["blade.section", "rotor.thrust", "drivetrain.torque", "mooring.tension", "wake.deficit", "cost.energy"]),
    );
  });
});

/** Each mistake of the history, alone in an otherwise sound code base, and the model whose derivative it spoils. */
const MISTAKES: readonly (readonly [string, Partial<Code>, string])[] = [
  ["a flipped sign", { temperatureSign: -1 }, "drivetrain.torque"],
  ["degrees for radians", { liftInRadians: false }, "blade.section"],
  ["a derivative left behind", { tipLoss: true, thrustKnowsTipLoss: false }, "rotor.thrust"],
  ["single precision", { coordinatesInDouble: false }, "wake.deficit"],
  ["a dropped term", { priceKnowsCable: false }, "cost.energy"],
  ["a loosened solve", { mooringSweeps: 15 }, "mooring.tension"],
  ["reordered rows", { transects: [0, 1, 3, 2, 4, 5] }, "wake.deficit"],
  ["per cent", { efficiencyInPercent: true }, "drivetrain.torque"],
];

describe("the demo's mistakes", () => {
  it.each(MISTAKES)("%s spoils the derivative of one model and no other", (_, set, spoilt) => {
    const code = { ...FIRST_CODE, ...set };
    const wrong = models.filter((model) => {
      const delivered = model.derivative?.(model.input.values, code);
      return delivered !== undefined && distance(delivered, byDualNumbers(model, code)) > 1e-6;
    });
    expect([...new Set(wrong.map((model) => model.model))]).toEqual([spoilt]);
  });

  it("loses the imaginary part where the depth is clipped, and nothing else", () => {
    const clipped = { ...FIRST_CODE, clipsDepth: true };
    const lost = models.filter(
      (model) => distance(byComplexSteps(model, clipped, 1e-20), byComplexSteps(model, FIRST_CODE, 1e-20)) > 1e-6,
    );
    expect([...new Set(lost.map((model) => model.model))]).toEqual(["cost.energy"]);
    for (const model of lost) {
      const steps = model.input.values.map((value) => 1e-6 * Math.max(Math.abs(value), 0.1));
      const delivered = model.derivative!(model.input.values, clipped);
      expect(distance(byCentralDifferences(model, clipped, steps), delivered)).toBeLessThan(1e-4);
    }
  });

  it("climbs as the mooring's solve is loosened, sweep by sweep", () => {
    const mooring = models.find((model) => model.model === "mooring.tension")!;
    const errors = [31, 27, 23, 19, 15].map((mooringSweeps) => {
      const code = { ...FIRST_CODE, mooringSweeps };
      return distance(mooring.derivative!(mooring.input.values, code), byDualNumbers(mooring, code));
    });
    errors.slice(1).forEach((error, at) => expect(error).toBeGreaterThan(3 * errors[at]!));
    expect(errors[3]).toBeLessThan(1e-6);
    expect(errors[4]).toBeGreaterThan(1e-6);
  });
});
