/** What holds for the study of any reference: no NaN, counts that add up, scales that move nothing but scales. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { adviseReference } from "../../shared/numerics/steps/adviseReference.ts";
import { studySteps } from "../../shared/numerics/steps/studySteps.ts";
import { studyTotals } from "../../shared/numerics/steps/studyTotals.ts";
import type { StepStudy } from "../../shared/numerics/steps/types.ts";
import type { BlockNumbers } from "../../shared/numerics/types.ts";
import { anyFinite, anyNumber, arbitraryBlock, tameNumber } from "./support/arbitraries.ts";
import { block } from "./support/blocks.ts";
import { reference } from "./support/references.ts";

const JUDGED = { rtol: 1e-6, floor: 1e-9 };
const studies = (numbers: BlockNumbers, judged = JUDGED) =>
  numbers.references.map((_, k) => studySteps(numbers, k, judged));

/** Every number of a study. */
function numbersOf(value: unknown): number[] {
  if (typeof value === "number") return [value];
  return typeof value === "object" && value !== null ? Object.values(value).flatMap(numbersOf) : [];
}

describe("the study of any reference", () => {
  it.each([
    ["finite numbers, those at the ends of the range among them", anyFinite],
    ["any numbers", anyNumber],
  ])("has no NaN and no negative number: %s", (_, number) => {
    fc.assert(
      fc.property(arbitraryBlock(number), fc.constantFrom(0, 1e-9, 1e300), (numbers, floor) => {
        for (const study of studies(numbers, { ...JUDGED, floor })) {
          for (const value of numbersOf(study)) expect(value).toBeGreaterThanOrEqual(0);
          expect(adviseReference(study).join(" ")).not.toMatch(/NaN|undefined|null/);
        }
      }),
      { numRuns: 300 },
    );
  });

  it("counts each entry once, and the steps from the largest down", () => {
    fc.assert(
      fc.property(arbitraryBlock(anyNumber), (numbers) => {
        for (const study of studies(numbers)) {
          expect(study.columns).toHaveLength(numbers.columns);
          for (const column of study.columns) {
            expect(column.entries).toBeLessThanOrEqual(numbers.rows);
            expect(column.resolved).toBeLessThanOrEqual(column.entries);
            expect(column.resolved).toBeGreaterThanOrEqual(column.quiet);
            expect(column.truncated + column.cancelled).toBeLessThanOrEqual(2 * (column.entries - column.resolved));
            for (const { resolved } of column.candidates) expect(resolved).toBeLessThanOrEqual(column.entries);
            const chosen = column.steps.reduce((sum, step) => sum + step.chosen, 0);
            expect(chosen).toBeLessThanOrEqual(column.entries - column.quiet);
            const steps = column.steps.map(({ step }) => step);
            expect(steps).toEqual(steps.toSorted((a, b) => b - a));
            for (const step of column.steps)
              expect(step.uncertainty.median).toBeLessThanOrEqual(step.uncertainty.largest);
          }
          const totals = studyTotals(study);
          expect(totals.entries).toBe(study.columns.reduce((sum, column) => sum + column.entries, 0));
        }
      }),
      { numRuns: 200 },
    );
  });

  it("moves only its scale when outputs and entries are scaled by a power of two", () => {
    fc.assert(
      fc.property(arbitraryBlock(tameNumber), fc.integer({ min: -40, max: 40 }), (numbers, power) => {
        const k = 2 ** power;
        const plain = scaledBy(withOutputs(numbers), 1, 1);
        const scaled = scaledBy(plain, k, k);
        const judged = { rtol: JUDGED.rtol, floor: JUDGED.floor * k };
        expect(studies(scaled, judged)).toEqual(studies(plain));
      }),
      { numRuns: 200 },
    );
  });

  it("moves its steps when the unit of the inputs is scaled by a power of two", () => {
    const input = fc.double({ min: 0.5, max: 4, noNaN: true });
    fc.assert(
      fc.property(
        arbitraryBlock(tameNumber),
        fc.array(input, { minLength: 5, maxLength: 5 }),
        fc.integer({ min: 0, max: 30 }),
        (numbers, inputs, power) => {
          const k = 2 ** power;
          const plain = withInputs(scaledBy(withOutputs(numbers), 1, 1), inputs);
          const scaled = withInputs(
            scaledBy(plain, 1, 1 / k, k),
            inputs.map((x) => x * k),
          );
          const told = studies(scaled, { rtol: JUDGED.rtol, floor: JUDGED.floor / k });
          studies(plain).forEach((study, r) => compareScaled(study, told[r]!, k));
        },
      ),
      { numRuns: 200 },
    );
  });
});

const withOutputs = (numbers: BlockNumbers): BlockNumbers => ({
  ...numbers,
  outputValues: numbers.outputValues ?? new Float64Array(numbers.rows).fill(1),
});
const withInputs = (numbers: BlockNumbers, inputs: readonly number[]): BlockNumbers => ({
  ...numbers,
  inputValues: Float64Array.from(inputs.slice(0, numbers.columns)),
});

/** Outputs times `ofOutputs`, entries and stated uncertainties times `ofEntries`, absolute steps times `ofSteps`. */
function scaledBy(numbers: BlockNumbers, ofOutputs: number, ofEntries: number, ofSteps = 1): BlockNumbers {
  return {
    ...numbers,
    outputValues: numbers.outputValues && numbers.outputValues.map((f) => f * ofOutputs),
    derivative: numbers.derivative.map((a) => a * ofEntries),
    references: numbers.references.map((one) => ({
      ...one,
      uncertainty: typeof one.uncertainty === "number" ? one.uncertainty * ofEntries : one.uncertainty,
      stepKind: "absolute",
      steps: one.steps.map(({ step, values }) => ({
        step: typeof step === "number" ? step * ofSteps : step,
        values: values.map((r) => r * ofEntries),
      })),
    })),
  };
}

function compareScaled(plain: StepStudy, scaled: StepStudy, k: number): void {
  scaled.columns.forEach((column, c) => {
    const before = plain.columns[c]!;
    expect(column.resolved).toBe(before.resolved);
    expect(column.steps.map(({ step }) => step / k)).toEqual(before.steps.map(({ step }) => step));
    expect(column.steps.map(({ uncertainty }) => uncertainty)).toEqual(
      before.steps.map(({ uncertainty }) => uncertainty),
    );
    column.candidates.forEach(({ step }, m) => {
      const expected = before.candidates[m]!.step;
      if (step === null || expected === null) expect(step).toBe(expected);
      // The cube root is the only operation that a power of two may disturb, in the last place.
      else expect(Math.abs(step / k - expected)).toBeLessThanOrEqual(2 ** -51 * expected);
    });
  });
}

describe("at the edges", () => {
  const sweep = reference("central-difference", [
    { step: 1e-3, values: Float64Array.of(NaN, 0, 2) },
    { step: 1e-5, values: Float64Array.of(1, 0, 2) },
  ]);
  it("an empty block, an entry without a value, one that saw no change and one with a single step", () => {
    expect(
      studySteps(block([], [reference("ad-forward", [{ step: null, values: new Float64Array(0) }])]), 0, JUDGED)
        .columns,
    ).toEqual([]);
    const { columns } = studySteps(block([[0, 0, 0]], [sweep], { outputs: [1], inputs: [1, 1, 1] }), 0, JUDGED);
    expect(columns.map(({ entries, quiet, steps }) => [entries, quiet, steps.length])).toEqual([
      [1, 0, 2],
      [1, 1, 0],
      [1, 0, 2],
    ]);
    expect(columns[0]!.steps.map(({ chosen, uncertainty }) => [chosen, uncertainty.median > 0])).toEqual([
      [0, false],
      [1, true],
    ]);
  });

  it("only the columns that are covered and wanted, in order", () => {
    const some = { ...sweep, columns: Int32Array.of(4, 0, 2) };
    const numbers = block([[0, 0, 0, 0, 0]], [some]);
    expect(studySteps(numbers, 0, JUDGED).columns.map(({ column }) => column)).toEqual([0, 2, 4]);
    expect(studySteps(numbers, 0, JUDGED, [1, 4]).columns.map(({ column }) => column)).toEqual([2]);
  });

  it("a difference without a step cannot tell, a method without steps has none", () => {
    const blind = reference("forward-difference", [{ step: null, values: Float64Array.of(1) }]);
    const [column] = studySteps(block([[1]], [blind], { outputs: [1], inputs: [1] }), 0, JUDGED).columns;
    expect(column).toMatchObject({ entries: 1, resolved: 0, steps: [] });
    expect(column!.candidates[0]!.step).toBeGreaterThan(0);
    const exact = reference("ad-reverse", [{ step: null, values: Float64Array.of(1) }]);
    expect(studySteps(block([[1]], [exact]), 0, JUDGED).columns).toEqual([
      expect.objectContaining({ entries: 1, resolved: 1, steps: [], curve: null, candidates: [] }),
    ]);
  });

  it("refuses a reference that is not there", () => {
    expect(() => studySteps(block([[1]], [sweep]), 1, JUDGED)).toThrow(/reference: 1, expected less than 1/);
    expect(() => studySteps(block([[1]], []), -1, JUDGED)).toThrow(RangeError);
  });
});
