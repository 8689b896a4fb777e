/**
 * The study of a reference's steps against published differences: what it estimates covers what is published, its best
 * steps are those of theory, and at the step that the judge chose it says what the judge said.
 */
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { bestReference } from "../../shared/numerics/reference/bestReference.ts";
import { studySteps } from "../../shared/numerics/steps/studySteps.ts";
import type { ColumnStudy } from "../../shared/numerics/steps/types.ts";
import type { BlockNumbers, ReferenceNumbers } from "../../shared/numerics/types.ts";
import { PROBLEMS } from "./problems/all.ts";
import type { Problem } from "./problems/problem.ts";
import { power } from "./problems/problem.ts";
import { exponentialOverCubes } from "./problems/squireTrapp.ts";
import { block, problemBlock } from "./support/blocks.ts";
import { expectTable } from "./support/expectTable.ts";
import type { TableRow } from "./support/expectTable.ts";
import { REAL } from "./support/field.ts";
import { readReference } from "./support/readReference.ts";
import { complexStep, differences, realResiduals, reference } from "./support/references.ts";

const JUDGED = { rtol: 1e-6, floor: 1e-12 };
const FORWARD = [1e-4, 1e-5, 1e-6, 1e-7, 1e-8, 1e-9, 1e-10];
const CENTRAL = [1e-2, 1e-3, 1e-4, 1e-5, 1e-6, 1e-7, 1e-8];

/** The only column of a scalar function's study. */
function scalarStudy(references: ReferenceNumbers, x: number, f: number): ColumnStudy {
  const numbers = block([[0]], [references], { outputs: [f], inputs: [x] });
  return studySteps(numbers, 0, JUDGED).columns[0]!;
}

/** Published values of one entry as the sweep that they are. */
function publishedSweep(method: ReferenceNumbers["method"], steps: readonly number[], values: readonly number[]) {
  return reference(
    method,
    steps.map((step, k) => ({ step, values: Float64Array.of(values[k]!) })),
  );
}

/** Every published value lies within the study's estimate of its step. `slack`: rounding of the printed value. */
function covered(label: string, study: ColumnStudy, values: readonly number[], exact: number, slack = 0): TableRow[] {
  const best = Math.abs(exact);
  return study.steps.map((step) => ({
    label: `${label}, h = ${step.step}`,
    actual: values[step.posted]!,
    expected: exact,
    tolerance: step.uncertainty.median * best * 1.01 + slack,
  }));
}

describe("published differences lie within the study's estimates", () => {
  it("central differences of the sine, halved steps", () => {
    const { x, exact, steps, central } = readReference<{
      x: number;
      exact: number;
      steps: number[];
      central: number[];
    }>("cheney-kincaid/sine.json");
    const study = scalarStudy(publishedSweep("central-difference", steps, central), x, Math.sin(x));
    expectTable("sine", covered("central", study, central, exact));
    expect(study.steps.map(({ branch }) => branch)).toEqual(steps.map(() => "truncation"));
    // Richardson: the truncation falls by 4 with each halving.
    const ratios = study.steps
      .slice(2)
      .map(({ truncation }, k) => study.steps[k + 1]!.truncation.median / truncation.median);
    expectTable(
      "fall of the truncation",
      ratios.slice(1).map((actual, k) => ({ label: `step ${k + 4}`, actual, expected: 4, tolerance: 0.08 })),
    );
    expect(study.truncated).toBe(1);
  });

  it("forward differences of the exponential, down to cancellation", () => {
    const { rows } = readReference<{ rows: { h: number; forward: number }[] }>("boisgerault/exp.json");
    const values = rows.map(({ forward }) => forward);
    const steps = rows.map(({ h }) => h);
    const study = scalarStudy(publishedSweep("forward-difference", steps, values), 0, 1);
    expectTable("exponential", covered("forward", study, values, 1));
    expect(study.steps.map(({ branch }) => branch)).toEqual(["truncation", "rounding", "rounding"]);
    expect(study.steps.map(({ chosen }) => chosen)).toEqual([0, 1, 0]);
  });

  it("complex steps of x exp(-x)", () => {
    const { x, exact, rows } = readReference<{ x: number; exact: number; rows: { h: number; value: number }[] }>(
      "boisgerault/complexStep.json",
    );
    const values = rows.map(({ value }) => value);
    const steps = rows.map(({ h }) => h);
    const study = scalarStudy(publishedSweep("complex-step", steps, values), x, x * Math.exp(-x));
    expectTable("complex step", covered("complex", study, values, exact, 0.5e-9));
  });

  it("the example of the GNU Scientific Library, whose step is far too small", () => {
    const gsl = readReference<{ x: number; h: number; printed: number; printedError: number; exact: number }>(
      "gsl/example.json",
    );
    const posted = publishedSweep("central-difference", [gsl.h], [gsl.printed]);
    const study = scalarStudy(posted, gsl.x, gsl.x ** 1.5);
    expectTable("x^(3/2)", covered("central", study, [gsl.printed], gsl.exact));
    expect(study.steps[0]!.branch).toBe("rounding");
    // Of the size of the library's own estimate, within a factor of five.
    const estimate = study.steps[0]!.uncertainty.median * gsl.printed;
    expect(Math.abs(Math.log(estimate / gsl.printedError))).toBeLessThan(Math.log(5));
    const [own] = study.candidates;
    expect(own!.step! / gsl.h).toBeGreaterThan(100);
  });

  it.each([
    ["forward-difference", FORWARD],
    ["central-difference", CENTRAL],
    ["complex-step", [1e-1, 1e-2, 1e-3, 1e-6, 1e-20]],
  ] as const)("Squire and Trapp's second example by %s", (method, steps) => {
    const slope = exponentialOverCubes.jacobian([1.5])[0]![0]!;
    const made = (step: number) =>
      method === "complex-step"
        ? complexStep(exponentialOverCubes, [1.5], step)
        : differences(realResiduals(exponentialOverCubes), [1.5], method, [step]);
    const values = steps.map((step) => made(step).steps[0]!.values[0]!);
    const absolute = steps.map((step) => (method === "complex-step" ? step : 1.5 * step));
    const f = exponentialOverCubes.residuals(REAL, [1.5])[0]!;
    const study = scalarStudy(publishedSweep(method, absolute, values), 1.5, f);
    expectTable(method, covered(method, study, values, slope));
  });
});

const ridders: Problem = {
  name: "e^x/(sin x - x^2)",
  residuals: (f, [x]) => [f.div(f.exp(x!), f.sub(f.sin(x!), power(f, x!, 2)))],
  jacobian: () => [[0]],
  points: [[1]],
};

interface Published {
  readonly x: number;
  readonly f: number;
  readonly f1: number;
  readonly forward: number;
  readonly central: number | null;
}

describe("the best step", () => {
  const theory = readReference<{
    exponentialOverCubes: Published;
    ridders: Published;
    relative: { forward: number; central: number };
  }>("step-theory/steps.json");
  const logRow = (label: string, actual: number, expected: number, factor: number): TableRow => ({
    label,
    actual: Math.log(actual),
    expected: Math.log(expected),
    tolerance: Math.log(factor),
  });
  const bestOf = (
    problem: Problem,
    x: number,
    method: "forward-difference" | "central-difference",
    steps: readonly number[],
  ) => {
    const numbers = problemBlock(problem, [x], [differences(realResiduals(problem), [x], method, steps)]);
    return studySteps(numbers, 0, JUDGED).columns[0]!.candidates[0]!.step!;
  };

  it("measured by a sweep is that of theory with the true curvature and the noise of the row's size", () => {
    // The judge takes P = max(|f|, |f'| x) for the size of what rounds, theory |f|.
    const rows = (["forward", "central"] as const).flatMap((name) => {
      const steps = name === "forward" ? FORWARD : CENTRAL;
      return [[exponentialOverCubes, theory.exponentialOverCubes] as const, [ridders, theory.ridders] as const].flatMap(
        ([problem, { x, f, f1, [name]: expected }]) => {
          if (expected === null) return [];
          const larger = Math.max(1, Math.abs((f1 * x) / f)) ** (name === "forward" ? 1 / 2 : 1 / 3);
          return [
            logRow(`${problem.name}, ${name}`, bestOf(problem, x, `${name}-difference`, steps), expected * larger, 1.3),
          ];
        },
      );
    });
    expect(rows).toHaveLength(3);
    expectTable("measured steps", rows);
  });

  it("modelled from a single step is near the root or the cube root of the precision, times the length", () => {
    expectTable("modelled steps", [
      logRow(
        "forward",
        bestOf(exponentialOverCubes, 1.5, "forward-difference", [1e-5]),
        1.5 * theory.relative.forward,
        2,
      ),
      logRow(
        "central",
        bestOf(exponentialOverCubes, 1.5, "central-difference", [1e-3]),
        1.5 * theory.relative.central,
        2,
      ),
    ]);
  });

  it("is as good as promised when it is taken", () => {
    const rows = PROBLEMS.flatMap((problem) => {
      const x = problem.points[0]!;
      const numbers = problemBlock(problem, x, [differences(realResiduals(problem), x, "central-difference", CENTRAL)]);
      const { columns } = studySteps(numbers, 0, JUDGED);
      return columns.flatMap(({ column, candidates }): TableRow[] => {
        const [own] = candidates;
        if (own?.step === null || own === undefined || own.resolution === null) return [];
        const h = own.step;
        const up = problem.residuals(
          REAL,
          x.map((value, k) => (k === column ? value + h : value)),
        );
        const down = problem.residuals(
          REAL,
          x.map((value, k) => (k === column ? value - h : value)),
        );
        const errors = problem.jacobian(x).map((row, i) => {
          const r = row[column]!;
          return Math.abs((up[i]! - down[i]!) / (2 * h) - r) / Math.max(Math.abs(r), 1e-3);
        });
        const largest = errors.reduce((a, b) => Math.max(a, b), 0);
        return [
          { label: `${problem.name} ${column}`, actual: largest, expected: 0, tolerance: own.resolution.largest },
        ];
      });
    });
    expect(rows.length).toBeGreaterThan(40);
    expectTable("error at the best step", rows);
  });

  it("of a sweep that cancels throughout comes from the model, not from the noise", () => {
    const cancelled = bestOf(exponentialOverCubes, 1.5, "central-difference", [1e-9, 1e-10, 1e-11, 1e-12]);
    expect(cancelled).toBeGreaterThan(1e-6);
    expect(cancelled).toBeLessThan(1e-4);
  });
});

describe("at the step that the judge chose", () => {
  const relative = (u: number, r: number) => u / Math.max(Math.abs(r), JUDGED.floor);

  it.each([
    ["forward-difference", FORWARD],
    ["central-difference", CENTRAL],
    ["central-difference", [1e-3, 1e-5]],
    ["backward-difference", [1e-4, 1e-6, 1e-8]],
  ] as const)("the study of a sweep says what the judge says: %s %j", (method, steps) => {
    let compared = 0;
    for (const problem of PROBLEMS) {
      for (const x of problem.points) {
        const whole = problemBlock(problem, x, [differences(realResiduals(problem), x, method, steps)]);
        for (let row = 0; row < whole.rows; row += 1) {
          const numbers = rowOf(whole, row);
          const best = bestReference(numbers, DEFAULT_TOLERANCES);
          for (const column of studySteps(numbers, 0, JUDGED).columns) {
            const chosen = column.steps.find((step) => step.chosen > 0);
            if (chosen === undefined) continue;
            const expected = relative(best.uncertainty[column.column]!, best.value[column.column]!);
            expect(chosen.posted).toBe(best.step[column.column]);
            expect(Math.abs(chosen.uncertainty.median - expected)).toBeLessThanOrEqual(1e-15 * expected);
            compared += 1;
          }
        }
      }
    }
    expect(compared).toBeGreaterThan(1000);
  });

  it.each([
    ["forward-difference", 1e-7],
    ["central-difference", 1e-5],
    ["complex-step", 1e-20],
  ] as const)("so does that of a single step: %s", (method, step) => {
    for (const problem of PROBLEMS) {
      for (const x of problem.points) {
        const made =
          method === "complex-step"
            ? complexStep(problem, x, step)
            : differences(realResiduals(problem), x, method, [step]);
        const numbers = problemBlock(problem, x, [made]);
        const best = bestReference(numbers, DEFAULT_TOLERANCES);
        for (const { column, steps, resolved, entries } of studySteps(numbers, 0, JUDGED).columns) {
          const rows = Array.from({ length: numbers.rows }, (_, row) => row * numbers.columns + column);
          const told = rows.map((at) => relative(best.uncertainty[at]!, best.value[at]!));
          expect(entries).toBe(rows.length);
          const living = rows.flatMap((at, k) =>
            method !== "complex-step" && best.sawNoChange[at] === 1 ? [] : [told[k]!],
          );
          expect(resolved).toBe(living.filter((u) => u <= JUDGED.rtol).length + rows.length - living.length);
          if (steps.length === 0) continue;
          const largest = living.reduce((a, b) => Math.max(a, b), 0);
          expect(Math.abs(steps[0]!.uncertainty.largest - largest)).toBeLessThanOrEqual(1e-15 * largest);
        }
      }
    }
  });
});

function rowOf(whole: BlockNumbers, row: number): BlockNumbers {
  const cut = (plane: Float64Array) => plane.slice(row * whole.columns, (row + 1) * whole.columns);
  return {
    ...whole,
    rows: 1,
    outputValues: whole.outputValues && whole.outputValues.slice(row, row + 1),
    derivative: cut(whole.derivative),
    references: whole.references.map((one) => ({
      ...one,
      steps: one.steps.map(({ step, values }) => ({ step, values: cut(values) })),
    })),
  };
}
