/** The Taylor remainder against exact remainders of a polynomial (reference/taylor/rosenbrock.json). */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { extrapolateRemainders } from "../../shared/numerics/probes/extrapolateRemainders.ts";
import { judgeTaylor } from "../../shared/numerics/probes/judgeTaylor.ts";
import { surveyRemainders } from "../../shared/numerics/probes/surveyRemainders.ts";
import type { TaylorProbe } from "../../shared/numerics/probes/types.ts";
import { anyFinite } from "./support/arbitraries.ts";
import { expectTable } from "./support/expectTable.ts";
import { readReference } from "./support/readReference.ts";

const GRADIENTS = ["right", "sign", "percent"] as const;
type Gradient = (typeof GRADIENTS)[number];
type Row = Readonly<Record<Gradient, number>> & {
  readonly step: number;
  readonly slopes?: Readonly<Record<Gradient, number>>;
};
interface Rosenbrock {
  readonly value: number;
  readonly scale: number;
  readonly alpha: Readonly<Record<Gradient, number>>;
  readonly rows: readonly Row[];
}
const { value, scale, alpha, rows } = readReference<Rosenbrock>("taylor/rosenbrock.json");
const RTOL = 1e-6;

function probe(gradient: Gradient, taken: readonly Row[], more: Partial<TaylorProbe> = {}): TaylorProbe {
  const steps = taken.map(({ step }) => step);
  return { steps, remainders: taken.map((row) => row[gradient]), scale, value, precision: null, ...more };
}

/** Every run of neighbouring rows of at least `shortest`. */
const runs = (shortest: number): Row[][] =>
  rows.flatMap((_, first) =>
    rows.slice(first + shortest - 1).map((__, more) => rows.slice(first, first + shortest + more)),
  );

describe("the slope", () => {
  it("of two neighbouring exact remainders is the published one", () => {
    expectTable(
      "slopes of exact remainders",
      rows.flatMap(({ slopes }, k) =>
        slopes === undefined
          ? []
          : GRADIENTS.map((gradient) => ({
              label: `${gradient} at step ${k}`,
              actual: judgeTaylor(probe(gradient, rows.slice(k - 1, k + 1)), RTOL).slope ?? NaN,
              expected: slopes[gradient],
              tolerance: 1e-9,
            })),
      ),
    );
  });

  it("is told and decides nothing where the size of g.d is known", () => {
    const judged = judgeTaylor(probe("percent", rows.slice(0, 4)), RTOL);
    expect(judged.slope).toBeGreaterThan(1.94);
    expect(judged.verdict).not.toBe("agrees");
  });
});

describe("with the size of g.d", () => {
  it("the error of the directional derivative is found within its uncertainty, from any run of steps", () => {
    expectTable(
      "alpha, extrapolated",
      runs(3).flatMap((taken) =>
        GRADIENTS.map((gradient) => {
          const judged = judgeTaylor(probe(gradient, taken), RTOL);
          const label = `${gradient}, ${taken.length} steps from ${taken[0]?.step}`;
          return { label, actual: judged.derivative, expected: alpha[gradient], tolerance: judged.uncertainty };
        }),
      ),
    );
  });

  it("a right gradient agrees from small steps and is never accused", () => {
    for (const taken of runs(2)) expect(judgeTaylor(probe("right", taken), RTOL).verdict).not.toBe("disagrees");
    expect(judgeTaylor(probe("right", rows), RTOL)).toMatchObject({ verdict: "agrees", reference: 0, floor: scale });
    expect(judgeTaylor(probe("right", rows.slice(-3)), RTOL).verdict).toBe("agrees");
  });

  it("a gradient wrong by 1 %, or by a sign, is never acquitted", () => {
    for (const gradient of ["sign", "percent"] as const) {
      for (const taken of runs(2)) {
        expect(judgeTaylor(probe(gradient, taken), RTOL).verdict).not.toBe("agrees");
        expect(judgeTaylor(probe(gradient, taken, { scale: null }), RTOL).verdict).not.toBe("agrees");
      }
      const judged = judgeTaylor(probe(gradient, rows), RTOL);
      expect(judged.verdict).toBe("disagrees");
      expect(judged.error).toBeCloseTo(alpha[gradient] / scale, 9);
    }
  });

  it("steps and remainders may come in any order", () => {
    const reversed = [...rows].reverse();
    for (const gradient of GRADIENTS) {
      expect(judgeTaylor(probe(gradient, reversed), RTOL)).toEqual(judgeTaylor(probe(gradient, rows), RTOL));
    }
  });
});

describe("without it", () => {
  it("the slope of the three smallest usable steps has to do", () => {
    const judged = (gradient: Gradient, taken: readonly Row[]) =>
      judgeTaylor(probe(gradient, taken, { scale: null }), RTOL);
    expect(judged("right", rows)).toMatchObject({ verdict: "agrees", tolerance: null });
    expect(judged("percent", rows)).toMatchObject({ verdict: "disagrees", tolerance: null });
    expect(judged("sign", rows.slice(-4)).verdict).toBe("disagrees");
    // The slope is 2, but over so few steps it would be so of a gradient wrong by 1 % as well.
    expect(judged("right", rows.slice(0, 4)).verdict).toBe("unresolved");
    expect(judged("right", rows.slice(0, 2)).verdict).toBe("unresolved");
  });
});

/** Remainders as a job computes them, in binary64. */
function computed(
  f: (t: number) => number,
  slope: number,
  steps: readonly number[],
): Pick<TaylorProbe, "steps" | "remainders"> {
  return { steps, remainders: steps.map((h) => Math.abs(f(h) - f(0) - h * slope)) };
}
const DECADES = Array.from({ length: 12 }, (_, k) => 10 ** -(k + 1));
const plain = { scale: null, value: null, precision: null };

describe("computed remainders", () => {
  const wave = (t: number) => Math.exp(Math.sin(1 + t));
  const slope = Math.cos(1) * Math.exp(Math.sin(1));

  it("that reach the rounding branch are told from a wrong gradient", () => {
    const { steps, remainders } = computed(wave, slope, DECADES);
    for (const more of [{ scale: slope, value: wave(0) }, { scale: slope }, {}]) {
      expect(judgeTaylor({ ...plain, steps, remainders, ...more }, RTOL).verdict).toBe("agrees");
    }
    const survey = surveyRemainders({ ...plain, steps, remainders, value: wave(0) });
    expect(survey.usable.length).toBeLessThan(steps.length);
    expect(extrapolateRemainders(survey).value).toBeCloseTo(0, 6);
  });

  it("of a gradient wrong by 1 % are never acquitted, whatever the steps", () => {
    for (let first = 0; first < DECADES.length; first += 1) {
      for (let last = first + 2; last <= DECADES.length; last += 1) {
        const made = computed(wave, slope * 1.01, DECADES.slice(first, last));
        for (const more of [{ scale: slope, value: wave(0) }, { scale: slope }, {}]) {
          const judged = judgeTaylor({ ...plain, ...made, ...more }, RTOL);
          expect(judged.verdict, `${first}..${last} ${JSON.stringify(more)}`).not.toBe("agrees");
        }
      }
    }
    const judged = judgeTaylor(
      { ...plain, ...computed(wave, slope * 1.01, DECADES), scale: slope, value: wave(0) },
      RTOL,
    );
    expect(judged.verdict).toBe("disagrees");
  });

  it("of a function far larger than its change are not mistaken for one", () => {
    const offset = (t: number) => 1e6 + wave(t);
    const { steps, remainders } = computed(offset, slope, DECADES);
    for (const more of [{ scale: slope, value: 1e6 }, { scale: slope }, {}, { value: 1e6 }]) {
      expect(judgeTaylor({ ...plain, steps, remainders, ...more }, RTOL).verdict).not.toBe("disagrees");
    }
  });

  it("of a linear function agree, unless the steps are too small to tell", () => {
    const line = (t: number) => 3 + 2 * t;
    const linear = { ...plain, ...computed(line, 2, [1e-2, 1e-3, 1e-4]) };
    for (const more of [{ scale: 2, value: 3 }, { scale: 2 }, { value: 3 }]) {
      expect(judgeTaylor({ ...linear, ...more }, RTOL).verdict, JSON.stringify(more)).toBe("agrees");
    }
    // Where no size at all is known, remainders of 1e-16 may be rounding or the whole function.
    expect(judgeTaylor(linear, RTOL).verdict).toBe("unresolved");
    const tiny = { ...plain, ...computed(line, 2.02, [1e-15, 1e-16]), scale: 2, value: 3 };
    expect(judgeTaylor(tiny, RTOL).verdict).toBe("unresolved");
  });

  it("of a function in single precision need its precision told", () => {
    const single = (t: number) => Math.fround(wave(t));
    const made = { ...plain, ...computed(single, slope, [1e-1, 1e-2, 1e-3, 1e-4, 1e-5]), scale: slope, value: wave(0) };
    expect(judgeTaylor({ ...made, precision: 2 ** -23 }, RTOL).verdict).toBe("unresolved");
    expect(judgeTaylor({ ...made, precision: 2 ** -23 }, 1e-2).verdict).toBe("agrees");
  });
});

describe("at the edges", () => {
  it("what is not finite is invalid, and lengths are checked", () => {
    for (const bad of [NaN, Infinity, -Infinity]) {
      const judged = judgeTaylor({ ...plain, steps: [1, 0.5], remainders: [1, bad] }, RTOL);
      expect(judged).toMatchObject({ verdict: "invalid", slope: null });
      expect(judged.error).toBeNaN();
    }
    expect(() => judgeTaylor({ ...plain, steps: [], remainders: [] }, RTOL)).toThrow(/^steps: 0 numbers/);
    expect(() => judgeTaylor({ ...plain, steps: [1], remainders: [] }, RTOL)).toThrow(/^remainders: 0 numbers/);
  });

  it("nothing at all agrees: no change was claimed and none seen", () => {
    const judged = judgeTaylor({ ...plain, steps: [1, 0.5], remainders: [0, -0], scale: 0, value: 0 }, RTOL);
    expect(judged).toMatchObject({ verdict: "agrees", error: 0, uncertainty: 0, slope: null, usableSteps: 0 });
  });

  it("one step alone never accuses nor acquits a remainder", () => {
    const judged = judgeTaylor({ ...plain, steps: [1e-3], remainders: [1], scale: 1, value: 1 }, RTOL);
    expect(judged.verdict).toBe("unresolved");
  });
});

const step = fc.oneof(
  fc.constantFrom(1, 0.5, 0.1, 1e-3, 1e-8, 1e-16, 5e-324, 1e300),
  fc.double({ min: 1e-12, max: 10, noNaN: true }),
);
const maybe = (number: fc.Arbitrary<number>) => fc.option(number.map(Math.abs), { nil: null });
const anyProbe = (number: fc.Arbitrary<number>): fc.Arbitrary<TaylorProbe> =>
  fc.uniqueArray(step, { minLength: 1, maxLength: 8 }).chain((steps) =>
    fc.record({
      steps: fc.constant(steps),
      remainders: fc.array(number, { minLength: steps.length, maxLength: steps.length }),
      scale: maybe(number),
      value: maybe(number),
      precision: fc.constantFrom(null, 2 ** -23, 1e-3),
    }),
  );

describe("for any numbers", () => {
  it("finite input gives no NaN", () => {
    fc.assert(
      fc.property(anyProbe(anyFinite), (posted) => {
        const judged = judgeTaylor(posted, RTOL);
        const { derivative, uncertainty, floor, error } = judged;
        expect([derivative, uncertainty, floor, error].filter(Number.isNaN)).toEqual([]);
        expect(judged.verdict).not.toBe("invalid");
        expect(uncertainty).toBeGreaterThanOrEqual(0);
      }),
      { numRuns: 2000 },
    );
  });

  it("a power of two as the unit of f changes no verdict", () => {
    const tame = fc.double({ min: -1e3, max: 1e3, noNaN: true }).map((x) => (Math.abs(x) < 1e-100 ? 0 : x));
    const tameStep = fc.double({ min: 1e-12, max: 10, noNaN: true });
    const tameProbe = fc.uniqueArray(tameStep, { minLength: 1, maxLength: 8 }).chain((steps) =>
      anyProbe(tame).map((posted) => ({
        ...posted,
        steps,
        remainders: steps.map((_, k) => posted.remainders[k % posted.remainders.length]!),
      })),
    );
    fc.assert(
      fc.property(tameProbe, fc.integer({ min: -300, max: 300 }), (posted, exponent) => {
        const scaled = (x: number) => x * 2 ** exponent;
        const there = judgeTaylor(
          {
            ...posted,
            remainders: posted.remainders.map(scaled),
            scale: posted.scale === null ? null : scaled(posted.scale),
            value: posted.value === null ? null : scaled(posted.value),
          },
          RTOL,
        );
        const here = judgeTaylor(posted, RTOL);
        expect(there).toMatchObject({ verdict: here.verdict, slope: here.slope, usableSteps: here.usableSteps });
      }),
      { numRuns: 1000 },
    );
  });
});
