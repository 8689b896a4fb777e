/** Facts of the trade that every practitioner knows: common practice, no source. */
import { describe, expect, it } from "vitest";
import type { Tolerances } from "../../shared/domain/tolerances.ts";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import type { Verdict } from "../../shared/domain/vocabulary.ts";
import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import { UNIT_ROUNDOFF } from "../../shared/numerics/roundoff.ts";
import type { ReferenceNumbers } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import type { Problem } from "./problems/problem.ts";
import { at } from "./problems/problem.ts";
import { problemBlock } from "./support/blocks.ts";
import type { Field } from "./support/field.ts";
import { complexStep, differenceOf, differences, realResiduals, reference } from "./support/references.ts";

/** A drag curve: x^2 e^(-x/2) + sin x, nothing special near 3.5. */
const drag: Problem = {
  name: "drag",
  residuals: (f, x) => [f.add(f.mul(f.mul(at(x, 0), at(x, 0)), f.exp(f.scale(at(x, 0), -0.5))), f.sin(at(x, 0)))],
  jacobian: ([x = NaN]) => [[(2 * x - (x * x) / 2) * Math.exp(-x / 2) + Math.cos(x)]],
  points: [[3.5]],
};

const slopeAt = (x: number): number => drag.jacobian([x])[0]?.[0] ?? NaN;

function verdictsOf(
  problem: Problem,
  x: readonly number[],
  references: readonly ReferenceNumbers[],
  tolerances: Tolerances = DEFAULT_TOLERANCES,
  derivative?: Float64Array,
): { verdicts: (Verdict | undefined)[]; codes: string[] } {
  const { verdict, best } = judgeBlock(problemBlock(problem, x, references, derivative), tolerances);
  return { verdicts: [...verdict].map((code) => VERDICTS[code]), codes: best.findings.map(({ code }) => code) };
}

/** A forward difference with an absolute step. */
function forward(problem: Problem, x: number, h: number): ReferenceNumbers {
  const f = (at: number) => realResiduals(problem)([at])[0] ?? NaN;
  const values = Float64Array.of((f(x + h) - f(x)) / h);
  return reference("forward-difference", [{ step: h, values }]);
}

describe("a forward step near x = 3.5", () => {
  it.each([
    ["sine", Math.sin, Math.cos],
    ["exponential", Math.exp, Math.exp],
    ["cube", (x: number) => x * x * x, (x: number) => 3 * x * x],
  ])("of 1e-9 is right to seven or eight digits: %s", (_, f, slope) => {
    const digits = Array.from({ length: 201 }, (_unused, k) => {
      const x = 3.4 + k / 1000;
      // The step that was really taken: x + 1e-9 is rounded.
      const h = x + 1e-9 - x;
      const estimate = (f(x + h) - f(x)) / h;
      return -Math.log10(Math.max(Math.abs(estimate / slope(x) - 1), UNIT_ROUNDOFF));
    }).sort((a, b) => a - b);
    expect(digits[100]).toBeGreaterThanOrEqual(7);
    expect(digits[100]).toBeLessThan(8.5);
    expect(digits[0]).toBeGreaterThan(6);
  });

  it("of 1e-9 confirms a derivative to six digits or so and does not pretend to know more", () => {
    const { verdicts } = verdictsOf(drag, [3.5], [forward(drag, 3.5, 1e-9)], { ...DEFAULT_TOLERANCES, rtol: 1e-5 });
    expect(verdicts).toEqual(["agrees"]);
    const strict = verdictsOf(drag, [3.5], [forward(drag, 3.5, 1e-9)], { ...DEFAULT_TOLERANCES, rtol: 1e-9 });
    expect(strict.verdicts).toEqual(["unresolved"]);
  });

  it("of 1e-16 sees no change at all and so decides nothing, whatever the derivative", () => {
    const blind = forward(drag, 3.5, 1e-16);
    expect(blind.steps[0]?.values[0]).toBe(0);
    for (const derivative of [slopeAt(3.5), 0, 1e9]) {
      expect(verdictsOf(drag, [3.5], [blind], DEFAULT_TOLERANCES, Float64Array.of(derivative))).toEqual({
        verdicts: ["unresolved"],
        codes: [],
      });
    }
  });

  it("of 1e-16 is named and set aside where a complex step stands beside it", () => {
    const references = [forward(drag, 3.5, 1e-16), complexStep(drag, [3.5])];
    expect(verdictsOf(drag, [3.5], references)).toEqual({ verdicts: ["agrees"], codes: ["reference-saw-no-change"] });
    const wrong = verdictsOf(drag, [3.5], references, DEFAULT_TOLERANCES, Float64Array.of(0));
    expect(wrong).toEqual({ verdicts: ["disagrees"], codes: ["reference-saw-no-change"] });
  });
});

describe("complex step and central difference", () => {
  const errorOf = (made: ReferenceNumbers) => (made.steps[0]?.values[0] ?? NaN) - slopeAt(3.5);
  const central = (h: number) => errorOf(differences(realResiduals(drag), [3.5], "central-difference", [h / 3.5]));
  const complex = (h: number) => errorOf(complexStep(drag, [3.5], h));

  it("truncate at the same second order, with opposite signs", () => {
    for (const h of [1e-1, 1e-2]) {
      expect(central(h) / central(h / 10)).toBeCloseTo(100, -1);
      expect(complex(h) / complex(h / 10)).toBeCloseTo(100, -1);
      expect(complex(h) / central(h)).toBeCloseTo(-1, 1);
    }
  });

  it("differ where h is tiny: the complex step at 1e-20 is right to machine precision", () => {
    expect(Math.abs(complex(1e-20) / slopeAt(3.5))).toBeLessThan(8 * UNIT_ROUNDOFF);
    expect(Math.abs(complex(1e-200) / slopeAt(3.5))).toBeLessThan(8 * UNIT_ROUNDOFF);
    expect(Math.abs(central(1e-20) / slopeAt(3.5))).toBe(1);
    const strict = verdictsOf(drag, [3.5], [complexStep(drag, [3.5])], { ...DEFAULT_TOLERANCES, rtol: 1e-13 });
    expect(strict.verdicts).toEqual(["agrees"]);
  });
});

describe("the price of a difference", () => {
  it.each([
    ["forward-difference", 1],
    ["backward-difference", 1],
    ["central-difference", 2],
  ] as const)("%s: %d more runs of the model per input", (method, each) => {
    for (const inputs of [1, 3, 20]) {
      let runs = 0;
      const model = (x: readonly number[]) => {
        runs += 1;
        return [x.reduce((sum, value) => sum + value * value, 0)];
      };
      differenceOf(model, new Array<number>(inputs).fill(2), method, 1e-6);
      expect(runs).toBe(1 + each * inputs);
    }
  });
});

describe("code that drops the imaginary part", () => {
  /** Power of a rotor below its rated speed, whose input is clipped by a comparison of real numbers. */
  const clipped = <T>(f: Field<T>, v: T): T => f.of(Math.min(f.re(v), 12));
  const rotor: Problem = {
    name: "rotor",
    residuals: (f, x) => [f.mul(at(x, 1), f.mul(clipped(f, at(x, 0)), clipped(f, at(x, 0)))), f.exp(at(x, 1))],
    jacobian: ([v = NaN, c = NaN]) => [
      [2 * c * v, v * v],
      [0, Math.exp(c)],
    ],
    points: [[7.5, 0.4]],
  };
  const x = [7.5, 0.4];
  const central = differences(realResiduals(rotor), x, "central-difference", [1e-2, 1e-3, 1e-4, 1e-5, 1e-6]);

  it("spoils the reference: alone, it accuses the right derivative", () => {
    expect(verdictsOf(rotor, x, [complexStep(rotor, x)]).verdicts).toEqual(["disagrees", "agrees", "agrees", "agrees"]);
  });

  it("is told by a difference beside it, which then decides", () => {
    const { verdicts, codes } = verdictsOf(rotor, x, [complexStep(rotor, x), central]);
    expect(verdicts).toEqual(["agrees", "agrees", "agrees", "agrees"]);
    expect(codes).toEqual(["reference-dropped-imaginary"]);
  });

  it("does not acquit a derivative that dropped the same part", () => {
    const dropped = Float64Array.of(0, 56.25, 0, Math.exp(0.4));
    const { verdicts } = verdictsOf(rotor, x, [complexStep(rotor, x), central], DEFAULT_TOLERANCES, dropped);
    expect(verdicts).toEqual(["disagrees", "agrees", "agrees", "agrees"]);
  });
});

describe("an inner solver that stops early", () => {
  const ECCENTRICITY = 0.6;
  /** E of E - e sin E = M by fixed-point iteration, stopped by a comparison with the last value. */
  const kepler = (stop: number): Problem => ({
    name: "kepler",
    residuals: (f, x) => {
      let angle = at(x, 0);
      for (let change = Infinity; change > stop;) {
        const next = f.add(at(x, 0), f.scale(f.sin(angle), ECCENTRICITY));
        change = Math.abs(f.re(next) - f.re(angle));
        angle = next;
      }
      return [angle];
    },
    jacobian: ([m = NaN]) => {
      const [angle = NaN] = realResiduals(kepler(1e-15))([m]);
      return [[1 / (1 - ECCENTRICITY * Math.cos(angle))]];
    },
    points: [],
  });
  const LOOSE = 1e-4;
  const POINTS = Array.from({ length: 60 }, (_, k) => [0.3 + k / 25]);
  const STEPS = [1e-3, 1e-4, 1e-5, 1e-6, 1e-7];
  const spoiled = (x: readonly number[], made: ReferenceNumbers) => {
    const truth = kepler(LOOSE).jacobian(x)[0]?.[0] ?? NaN;
    return Math.abs((made.steps.at(-1)?.values[0] ?? NaN) / truth - 1);
  };

  it("spoils every reference and not the derivative, which a tight solver confirms", () => {
    const central = (stop: number, x: readonly number[]) =>
      differences(realResiduals(kepler(stop)), x, "central-difference", STEPS);
    const worst = (made: (x: readonly number[]) => ReferenceNumbers) =>
      Math.max(...POINTS.map((x) => spoiled(x, made(x))));
    expect(worst((x) => central(LOOSE, x))).toBeGreaterThan(1e-4);
    expect(worst((x) => complexStep(kepler(LOOSE), x))).toBeGreaterThan(1e-4);
    for (const x of POINTS) {
      expect(verdictsOf(kepler(1e-15), x, [central(1e-15, x)]).verdicts).toEqual(["agrees"]);
    }
  });

  it.each([
    ["forward-difference", [1e-7]],
    ["forward-difference", STEPS],
    ["central-difference", [1e-5]],
    ["central-difference", STEPS],
  ] as const)("accuses nobody when its precision is posted: %s %j", (method, steps) => {
    for (const x of POINTS) {
      const made = differences(realResiduals(kepler(LOOSE)), x, method, steps, { precision: LOOSE });
      expect(verdictsOf(kepler(LOOSE), x, [made]).verdicts).not.toContain("disagrees");
    }
  });

  it("accuses nobody through a complex step either when its precision is posted", () => {
    for (const x of POINTS) {
      const made = { ...complexStep(kepler(LOOSE), x), precision: LOOSE };
      expect(verdictsOf(kepler(LOOSE), x, [made]).verdicts).not.toContain("disagrees");
    }
  });
});
