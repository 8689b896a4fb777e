/** The best reference of an entry (section 1 of the judging rules): kinds of uncertainty, sweeps, several methods. */
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { REFERENCE_METHODS } from "../../shared/domain/vocabulary.ts";
import { UNIT_ROUNDOFF } from "../../shared/numerics/roundoff.ts";
import { bestReference } from "../../shared/numerics/reference/bestReference.ts";
import type { BlockNumbers, ReferenceNumbers } from "../../shared/numerics/types.ts";
import { NO_SOURCE } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { block } from "./support/blocks.ts";
import { differences, reference } from "./support/references.ts";

const best = (numbers: BlockNumbers) => bestReference(numbers, DEFAULT_TOLERANCES);
const f64 = (...values: number[]) => Float64Array.from(values);
const values = { outputs: [1], inputs: [1] };
const exact = (r: number, rest: Partial<ReferenceNumbers> = {}) =>
  reference("ad-reverse", [{ step: null, values: f64(r) }], rest);
const forward = (r: number, rest: Partial<ReferenceNumbers> = {}) =>
  reference("forward-difference", [{ step: 1e-8, values: f64(r) }], rest);
const complex = (r: number) => reference("complex-step", [{ step: 1e-20, values: f64(r) }]);
const codesOf = (numbers: BlockNumbers) => best(numbers).findings.map(({ code }) => code);

describe("a stated uncertainty", () => {
  it("is taken as it is: a number for all, or one an entry", () => {
    const one = best(
      block([[1, 2]], [reference("forward-difference", [{ step: 1e-8, values: f64(1, 2) }], { uncertainty: 0.25 })]),
    );
    expect([...one.uncertainty]).toEqual([0.25, 0.25]);
    expect(one.kinds).toEqual(["stated"]);
    expect(one.assumed).toEqual([false]);
    const each = best(
      block([[1, 2]], [reference("analytic", [{ step: null, values: f64(1, 2) }], { uncertainty: f64(0, 3) })]),
    );
    expect([...each.uncertainty]).toEqual([0, 3]);
  });

  it("stands in for a sweep's and is not taken where it states nothing", () => {
    const sweep = differences(
      ([x = NaN]) => [Math.exp(x), Math.sin(x)],
      [1],
      "central-difference",
      [1e-3, 1e-4, 1e-5, 1e-6],
    );
    const measured = best(block([[1], [1]], [sweep], { outputs: [Math.E, 0.84], inputs: [1] }));
    const stated = best(
      block([[1], [1]], [{ ...sweep, uncertainty: f64(0.5, NaN) }], { outputs: [Math.E, 0.84], inputs: [1] }),
    );
    expect(stated.uncertainty[0]).toBe(0.5);
    expect(stated.uncertainty[1]).toBe(measured.uncertainty[1]);
    expect(measured.kinds).toEqual(["measured"]);
  });

  it("of 0 makes the reference the truth", () => {
    const judged = judgeBlock(block([[1 + 1e-15]], [exact(1, { uncertainty: 0 })]), { ...DEFAULT_TOLERANCES, rtol: 0 });
    expect(judged.counts.disagrees).toBe(1);
    expect(
      judgeBlock(block([[1]], [exact(1, { uncertainty: 0 })]), { ...DEFAULT_TOLERANCES, rtol: 0 }).counts.agrees,
    ).toBe(1);
  });
});

describe("a modelled uncertainty", () => {
  it("of methods without a step is 64 u max(|r|, floor)", () => {
    for (const method of ["analytic", "ad-forward", "ad-reverse", "high-precision"] as const) {
      const found = best(block([[1000, 1e-6]], [reference(method, [{ step: null, values: f64(1000, 1e-6) }])]));
      expect([...found.uncertainty]).toEqual([64 * UNIT_ROUNDOFF * 1000, 64 * UNIT_ROUNDOFF]);
      expect(found.kinds).toEqual(["modelled"]);
      expect(found.assumed).toEqual([false]);
    }
  });

  it("is marked assumed where F, x or the step are not known", () => {
    const assumed = (given: { outputs?: number[]; inputs?: number[] }, made = forward(1)) =>
      best(block([[1]], [made], given)).assumed;
    expect(assumed(values)).toEqual([false]);
    expect(assumed({ inputs: [1] })).toEqual([true]);
    expect(assumed({ outputs: [1] })).toEqual([true]);
    expect(assumed({ outputs: [NaN], inputs: [1] })).toEqual([true]);
    expect(assumed({ outputs: [1], inputs: [Infinity] })).toEqual([true]);
    expect(assumed(values, reference("complex-step", [{ step: null, values: f64(1) }]))).toEqual([true]);
    expect(assumed({}, exact(1))).toEqual([false]);
  });

  it("grows with the step of a one-sided difference, and with the noise where the step is small", () => {
    const at = (step: number) =>
      best(block([[1]], [reference("forward-difference", [{ step, values: f64(1) }])], values)).uncertainty[0] ?? NaN;
    expect(at(1e-2) / at(1e-4)).toBeCloseTo(100, 0);
    expect(at(1e-12) / at(1e-10)).toBeCloseTo(100, 0);
    expect(at(1e-8)).toBeLessThan(at(1e-4));
    expect(at(1e-8)).toBeLessThan(at(1e-12));
  });

  it("is infinite for a difference without a usable step", () => {
    for (const step of [0, NaN, Infinity, null, 1e-17]) {
      const found = best(block([[1]], [reference("forward-difference", [{ step, values: f64(1) }])], values));
      expect(found.uncertainty[0]).toBe(Infinity);
      expect(found.value[0]).toBe(1);
    }
  });

  it("takes a step of either sign, and relative ones times max(|x|, 1)", () => {
    const at = (step: number, stepKind: "absolute" | "relative", x: number) =>
      best(
        block([[1]], [reference("forward-difference", [{ step, values: f64(1) }], { stepKind })], {
          outputs: [1],
          inputs: [x],
        }),
      ).uncertainty[0];
    expect(at(-1e-6, "absolute", 1)).toBe(at(1e-6, "absolute", 1));
    expect(at(1e-6, "relative", 1000)).toBe(at(1e-3, "absolute", 1000));
    expect(at(1e-6, "relative", 0.5)).toBe(at(1e-6, "absolute", 0.5));
  });
});

describe("a sweep", () => {
  const f = ([x = NaN]: readonly number[]) => [Math.exp(2 * x)];
  const steps = [1e-2, 1e-3, 1e-4, 1e-5, 1e-6];
  const made = differences(f, [1], "central-difference", steps);
  const given = { outputs: [Math.exp(2)], inputs: [1] };
  const inOrder = best(block([[1]], [made], given));

  it("gives the same estimate in whatever order its steps were posted, and names the step as posted", () => {
    for (const order of [
      [4, 3, 2, 1, 0],
      [2, 0, 4, 1, 3],
    ]) {
      const shuffled = { ...made, steps: order.flatMap((k) => made.steps.slice(k, k + 1)) };
      const found = best(block([[1]], [shuffled], given));
      expect(found.value).toEqual(inOrder.value);
      expect(found.uncertainty).toEqual(inOrder.uncertainty);
      expect(order[found.step[0] ?? -1]).toBe(inOrder.step[0]);
    }
  });

  it("does not count a step twice", () => {
    const repeated = { ...made, steps: [...made.steps, ...made.steps.slice(2, 4)] };
    expect(best(block([[1]], [repeated], given)).uncertainty).toEqual(inOrder.uncertainty);
    const twice = differences(f, [1], "central-difference", [1e-4, 1e-4]);
    const once = differences(f, [1], "central-difference", [1e-4]);
    expect(best(block([[1]], [twice], given)).uncertainty).toEqual(best(block([[1]], [once], given)).uncertainty);
  });

  it("leaves out values that are not finite", () => {
    const holed = {
      ...made,
      steps: [...made.steps, { step: 1e-7, values: f64(NaN) }, { step: 1, values: f64(Infinity) }],
    };
    const found = best(block([[1]], [holed], given));
    expect(found.value).toEqual(inOrder.value);
    expect(found.uncertainty).toEqual(inOrder.uncertainty);
  });

  it("with steps of its own for each column is the same as column by column", () => {
    const g = ([x = NaN, y = NaN]: readonly number[]) => [Math.exp(2 * x) * Math.cos(y)];
    const wide = (scale: number) =>
      steps.map((step) => {
        const first = differences(g, [1, 2], "central-difference", [step]).steps[0]?.values[0] ?? NaN;
        const second = differences(g, [1, 2], "central-difference", [step * scale]).steps[0]?.values[1] ?? NaN;
        // Relative to x = 2 the second step is twice as large.
        return { step: f64(step, 2 * step * scale), values: f64(first, second) };
      });
    const given = { outputs: g([1, 2]), inputs: [1, 2] };
    const found = best(block([[1, 1]], [reference("central-difference", wide(0.5))], given));
    const truth = [2 * Math.exp(2) * Math.cos(2), -Math.exp(2) * Math.sin(2)];
    truth.forEach((slope, k) => {
      expect(Math.abs((found.value[k] ?? NaN) - slope)).toBeLessThanOrEqual(found.uncertainty[k] ?? NaN);
      expect(found.uncertainty[k]).toBeLessThan(1e-7);
    });
  });

  it("whose values jump says so in its uncertainty", () => {
    const noisy = differences(
      ([x = NaN]) => [Math.exp(2 * x) + 1e-6 * Math.sin(1e9 * x)],
      [1],
      "central-difference",
      steps,
    );
    const found = best(block([[1]], [noisy], given));
    expect(Math.abs((found.value[0] ?? NaN) - 2 * Math.exp(2))).toBeLessThanOrEqual(found.uncertainty[0] ?? NaN);
    expect(found.uncertainty[0]).toBeGreaterThan(100 * (inOrder.uncertainty[0] ?? NaN));
  });
});

describe("several references", () => {
  it.each(REFERENCE_METHODS)("take the surest: %s beside a coarse difference", (method) => {
    const coarse = reference("forward-difference", [{ step: 0.1, values: f64(1) }]);
    const step = method.includes("difference") ? 1e-6 : method === "complex-step" ? 1e-20 : null;
    const found = best(block([[1]], [coarse, reference(method, [{ step, values: f64(1) }])], values));
    expect(found.source[0]).toBe(1);
    expect(found.conflict[0]).toBe(0);
  });

  it("conflict where they differ by more than their uncertainties: nobody is accused", () => {
    const both = block([[5]], [exact(1), complex(2)], values);
    const found = best(both);
    expect([...found.conflict]).toEqual([1]);
    expect(found.uncertainty[0]).toBe(Infinity);
    expect(found.findings).toEqual([{ code: "references-conflict", reference: null, entries: 1 }]);
    expect(judgeBlock(both, DEFAULT_TOLERANCES).counts.unresolved).toBe(1);
  });

  it("do not conflict within the sum of their uncertainties", () => {
    const found = best(block([[1]], [exact(1, { uncertainty: 0.5 }), complex(1.4)], values));
    expect([...found.conflict]).toEqual([0]);
    expect(found.value[0]).toBe(1.4);
  });

  it("conflict as a pair among several, even where a third spans both", () => {
    const wide = exact(1.5, { uncertainty: 10 });
    expect([...best(block([[1]], [wide, exact(1), exact(2)])).conflict]).toEqual([1]);
  });

  it("are all in the answer, by kind, with those of which nothing is known left out", () => {
    const all = [exact(1), forward(1), complex(1), reference("ad-forward", [{ step: null, values: f64(NaN) }])];
    const found = best(block([[1]], all, values));
    expect(found.kinds).toEqual(["modelled", "modelled", "modelled", "modelled"]);
    expect(found.source[0]).toBe(2);
  });
});

describe("a reference that betrays itself", () => {
  it("drops the imaginary part: the zeros of that complex step are not believed where a difference saw change", () => {
    const difference = reference("central-difference", [{ step: 1e-6, values: f64(3, 2e-12, 0) }]);
    const dropped = reference("complex-step", [{ step: 1e-20, values: f64(0, 0, 0) }]);
    const found = best(block([[3, 0, 0]], [dropped, difference], { outputs: [1], inputs: [1, 1, 1] }));
    expect([...found.source]).toEqual([1, 1, 0]);
    expect(found.findings).toEqual([{ code: "reference-dropped-imaginary", reference: 0, entries: 2 }]);
  });

  it("saw no change where a complex step saw one", () => {
    const found = best(block([[3]], [forward(0), complex(3)], values));
    expect(found.source[0]).toBe(1);
    expect(found.findings).toEqual([{ code: "reference-saw-no-change", reference: 0, entries: 1 }]);
    expect(found.sawNoChange[0]).toBe(0);
  });

  it("posted what is not finite", () => {
    const found = best(block([[3]], [forward(Infinity, { notFinite: 1 })], values));
    expect(found.findings).toEqual([{ code: "reference-not-finite", reference: 0, entries: 1 }]);
    expect(found.source[0]).toBe(NO_SOURCE);
    expect(codesOf(block([[3]], [forward(3, { notFinite: 0 })], values))).toEqual([]);
  });
});

describe("no change claimed, none seen", () => {
  it("agrees: a structural zero is not left open", () => {
    const zero = (a: number, ...references: ReferenceNumbers[]) =>
      judgeBlock(block([[a]], references, values), DEFAULT_TOLERANCES).counts;
    expect(zero(0, forward(0)).agrees).toBe(1);
    expect(zero(-0, forward(-0)).agrees).toBe(1);
    expect(zero(0, forward(0), complex(0)).agrees).toBe(1);
    // Another method says otherwise.
    expect(zero(0, forward(0), exact(3)).agrees).toBe(0);
    // The derivative claims a change.
    expect(zero(1, forward(0)).agrees).toBe(0);
  });
});
