/** What the advice says, and that it says nothing where nothing is to be done. */
import { describe, expect, it } from "vitest";
import { adviseReference } from "../../shared/numerics/steps/adviseReference.ts";
import { roughly, shareOf } from "../../shared/numerics/steps/roughly.ts";
import { studySteps } from "../../shared/numerics/steps/studySteps.ts";
import type { ReferenceNumbers } from "../../shared/numerics/types.ts";
import { exponentialOverCubes } from "./problems/squireTrapp.ts";
import { block, problemBlock } from "./support/blocks.ts";
import { complexStep, differences, realResiduals, reference } from "./support/references.ts";

const X = [1.5];
const study = (made: ReferenceNumbers, rtol = 1e-6) =>
  studySteps(problemBlock(exponentialOverCubes, X, [made]), 0, { rtol, floor: 1e-12 });
const made = (method: "forward-difference" | "central-difference", steps: readonly number[], rest = {}) =>
  differences(
    realResiduals(exponentialOverCubes),
    X,
    method,
    steps.map((step) => step / 1.5),
    { stepKind: "relative", ...rest },
  );

describe("the advice", () => {
  it("says so where every entry is resolved, and nothing else", () => {
    expect(adviseReference(study(made("central-difference", [1e-3, 1e-4, 1e-5, 1e-6])))).toEqual([
      "Central differences at steps from 10⁻³ to 10⁻⁶ resolve every entry at 10⁻⁶.",
    ]);
    expect(adviseReference(study(complexStep(exponentialOverCubes, X)))).toEqual([
      "Complex steps at 10⁻²⁰ resolve every entry at 10⁻⁶.",
    ]);
    const exact = reference("ad-reverse", [{ step: null, values: Float64Array.of(3.6) }]);
    expect(adviseReference(study(exact))).toEqual(["The reverse AD reference resolves every entry at 10⁻⁶."]);
  });

  it("sends a forward difference to a better step while one is enough, and to central ones when it is not", () => {
    expect(adviseReference(study(made("forward-difference", [1e-10])))).toEqual([
      "Forward differences at 10⁻¹⁰ cannot see 10⁻⁶ here; a forward step near 3 × 10⁻⁸ would resolve every entry.",
      "In one entry the step is too small, and rounding is what it sees: take larger ones, near 3 × 10⁻⁸.",
    ]);
    expect(adviseReference(study(made("forward-difference", [1e-8]), 1e-9))[0]).toBe(
      "Forward differences at 10⁻⁸ cannot see 10⁻⁹ here; a central step near 10⁻⁵ would resolve every entry.",
    );
    expect(adviseReference(study(made("forward-difference", [1e-8]), 1e-13))[0]).toBe(
      "Forward differences at 10⁻⁸ cannot see 10⁻¹³ here; a complex step of 2 × 10⁻⁸ or less would resolve every entry, if the code takes complex numbers.",
    );
  });

  it("tells a sweep that is still truncating, and one that cancels from its first step on", () => {
    const [, truncating] = adviseReference(study(made("central-difference", [1e-1, 5e-2, 2e-2, 1e-2])));
    expect(truncating).toMatch(
      /^In one entry the sweep is still truncating at its smallest step: take smaller ones, near \d × 10⁻⁶\.$/,
    );
    const [, cancelling] = adviseReference(study(made("central-difference", [1e-10, 1e-11, 1e-12, 1e-13])));
    expect(cancelling).toMatch(
      /^In one entry the sweep is cancelling from its largest step on: take larger ones, near (\d × )?10⁻⁵\.$/,
    );
  });

  it("blames the function's noise where no step would do", () => {
    // Twelve steps about the best one, the values correct to 1e-4 only.
    const steps = [1e-1, 1e-2, 1e-3, 1e-4];
    const values = (k: number) => Float64Array.of(1 + [0, 1, -1, 1][k]! * (1e-4 / steps[k]!));
    const noisy = reference(
      "central-difference",
      steps.map((step, k) => ({ step, values: values(k) })),
      { precision: 1e-4 },
    );
    const numbers = block([[1]], [noisy], { outputs: [1], inputs: [1] });
    const [sentence] = adviseReference(studySteps(numbers, 0, { rtol: 1e-9, floor: 1e-12 }));
    expect(sentence).toContain("no other step would do better: the function's own noise limits them");
  });

  it("tells of what the references said of themselves, each to the method that it concerns", () => {
    const findings = [
      { code: "reference-dropped-imaginary", entries: 4 },
      { code: "reference-saw-no-change", entries: 2 },
      { code: "references-conflict", entries: 1 },
      { code: "reference-not-finite", entries: 3 },
    ] as const;
    const complex = adviseReference(study(complexStep(exponentialOverCubes, X)), findings);
    expect(complex.map((sentence) => sentence.split(":")[0])).toEqual([
      "The complex step lost its imaginary part in 4 entries",
      "Elsewhere complex steps at 10⁻²⁰ resolve every entry at 10⁻⁶.",
      "The references of this block conflict in one entry, beyond both their uncertainties",
      "3 entries of the block's references are not finite.",
    ]);
    const central = adviseReference(study(made("central-difference", [1e-3, 1e-4, 1e-5, 1e-6])), findings);
    expect(central[1]).toBe(
      "In 2 entries the difference saw no change where a complex step did: its step is too small.",
    );
  });

  it("of columns without a value says that", () => {
    const hole = reference("forward-difference", [{ step: 1e-8, values: Float64Array.of(NaN) }]);
    expect(adviseReference(study(hole))).toEqual(["Forward differences gave no value in these columns."]);
  });

  it("says what limits a stated uncertainty", () => {
    const [sentence, more] = adviseReference(study(made("central-difference", [1e-5], { uncertainty: 1 })));
    expect(sentence).toContain("Central differences at 10⁻⁵ cannot see 10⁻⁶ here; a central step near");
    expect(more).toBeUndefined();
  });
});

describe("numbers in sentences", () => {
  it.each([
    [0, "0"],
    [6.06e-6, "6 × 10⁻⁶"],
    [1e-8, "10⁻⁸"],
    [9.7e-9, "10⁻⁸"],
    [0.023, "0.02"],
    [2.6, "3"],
    [9.6, "10¹"],
    [1e300, "10³⁰⁰"],
    [5e-324, "5 × 10⁻³²⁴"],
    [Infinity, "Infinity"],
  ])("%d is %s", (value, text) => expect(roughly(value)).toBe(text));
  it.each([
    [0, 5, "no entry"],
    [5, 5, "every entry"],
    [3, 5, "3 of 5 entries"],
    [998, 1000, "99 % of the entries"],
    [1, 1000, "1 % of the entries"],
  ])("%d of %d is %s", (part, whole, text) => expect(shareOf(part, whole)).toBe(text));
});
