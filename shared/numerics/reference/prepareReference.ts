import type { Tolerances } from "../../domain/tolerances.ts";
import { DEFAULT_PRECISION } from "../roundoff.ts";
import type { BlockNumbers, ReferenceNumbers } from "../types.ts";
import { absoluteSteps } from "./absoluteSteps.ts";
import { checkReference } from "./checkReference.ts";
import { columnModel } from "./columnModel.ts";
import type { Estimates, Estimator } from "./estimator.ts";
import { fillExact } from "./fillExact.ts";
import { fillSingleStep } from "./fillSingleStep.ts";
import { fillSweep } from "./fillSweep.ts";
import type { Geometry } from "./geometry.ts";
import { geometry } from "./geometry.ts";
import { largestMagnitude } from "./largestMagnitude.ts";
import { overrideStated } from "./overrideStated.ts";
import { postedValues, withoutInfinities } from "./posted.ts";
import type { Scheme } from "./scheme.ts";
import { schemeOf } from "./scheme.ts";
import { surveyRows } from "./surveyRows.ts";
import { sweepPlan } from "./sweepPlan.ts";
import { sweepReader } from "./sweepReader.ts";

/** How a reference gives its estimates. */
type Source = Pick<Estimator, "posted" | "fill">;

/**
 * Makes one reference of a block ready to give estimates by bands of rows.
 * Throws RangeError naming the argument when a shape is wrong; `name` is the reference's name in it.
 */
export function prepareReference(
  block: Omit<BlockNumbers, "derivative">,
  reference: ReferenceNumbers,
  tolerances: Tolerances,
  name: string,
): Estimator {
  const sizes = geometry(block, reference, name);
  checkReference(reference, sizes, name);
  const scheme = schemeOf(reference.method);
  const source = sourceOf(reference, scheme, tolerances, sizes);
  const stated = reference.uncertainty;
  const measured = source.posted === null && scheme?.noisyValues !== 0;
  const stepKnown = reference.steps.every((step) => step.step !== null);
  return {
    kind: stated !== null ? "stated" : measured ? "measured" : "modelled",
    width: sizes.width,
    position: sizes.position,
    assumed: scheme !== null && stated === null && !(sizes.outputsKnown && sizes.inputsKnown && stepKnown),
    posted: source.posted,
    fill: stated === null ? source.fill : withStated(source.fill, stated, sizes.width),
  };
}

/** eta: the precision that was posted, where it is one, else the default. */
export function precisionOf({ precision }: ReferenceNumbers): number {
  return precision !== null && precision > 0 && precision < Infinity ? precision : DEFAULT_PRECISION;
}

function sourceOf(reference: ReferenceNumbers, scheme: Scheme | null, tolerances: Tolerances, sizes: Geometry): Source {
  const { values, step } = reference.steps[0];
  if (scheme === null) return exactSource(values, tolerances, sizes);
  const precision = precisionOf(reference);
  if (reference.steps.length > 1) {
    const reader = sweepReader(reference.steps, sweepPlan(reference, scheme, sizes));
    return { posted: null, fill: (first, last, out) => fillSweep(reader, scheme, precision, sizes, first, last, out) };
  }
  const steps = absoluteSteps(step, reference.stepKind, scheme, sizes);
  return singleStepSource(values, scheme, steps, precision, sizes);
}

function exactSource(values: Float64Array, tolerances: Tolerances, sizes: Geometry): Source {
  const posted = postedValues(values);
  // The floor of the block needs the best references; that of the reference's own values stands in for it.
  const largest = Math.abs(posted.values[posted.peak] ?? 0);
  const floor = Math.max(tolerances.floorAbs, tolerances.floorRel * largest);
  return { posted, fill: (first, last, out) => fillExact(posted.values, sizes.width, floor, first, last, out) };
}

function singleStepSource(
  values: Float64Array,
  scheme: Scheme,
  steps: Float64Array,
  precision: number,
  sizes: Geometry,
): Source {
  const model = columnModel(scheme, steps, precision, sizes);
  if (scheme.noisyValues === 0) {
    const posted = postedValues(values);
    const rowSize = sizes.outputs.map((size) => Math.max(size, Number.MIN_VALUE));
    return {
      posted,
      fill: (first, last, out) => fillSingleStep(posted.values, model, rowSize, sizes, first, last, out),
    };
  }
  const survey = surveyRows(values, model, sizes);
  if (survey.largest === Infinity) return singleStepSource(withoutInfinities(values), scheme, steps, precision, sizes);
  const peak = largestMagnitude(values, survey.row * sizes.width, (survey.row + 1) * sizes.width);
  return {
    posted: { values, peak },
    fill: (first, last, out) => fillSingleStep(values, model, survey.sizes, sizes, first, last, out),
  };
}

function withStated(
  fill: Estimator["fill"],
  stated: NonNullable<ReferenceNumbers["uncertainty"]>,
  width: number,
): Estimator["fill"] {
  return (first: number, last: number, out: Estimates) => {
    const odd = fill(first, last, out);
    overrideStated(stated, first * width, (last - first) * width, out);
    return odd;
  };
}
