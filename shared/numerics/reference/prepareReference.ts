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
import { rowSizes } from "./rowSizes.ts";
import type { Scheme } from "./scheme.ts";
import { schemeOf } from "./scheme.ts";
import { sweepPlan } from "./sweepPlan.ts";
import { sweepReader } from "./sweepReader.ts";

type Fill = Estimator["fill"];

/**
 * Makes one reference of a block ready to give estimates by bands of rows.
 * Throws RangeError naming the argument when a shape is wrong; `name` is the reference's name in it.
 */
export function prepareReference(
  block: BlockNumbers,
  reference: ReferenceNumbers,
  tolerances: Tolerances,
  name: string,
): Estimator {
  const sizes = geometry(block, reference, name);
  checkReference(reference, sizes, name);
  const scheme = schemeOf(reference.method);
  const single = scheme === null || reference.steps.length === 1;
  const values = reference.steps[0]?.values ?? new Float64Array(0);
  const fill = scheme === null ? exactFill(values, tolerances, sizes) : stepFill(reference, scheme, values, sizes);
  const stated = reference.uncertainty;
  const measured = !single && scheme.noisyValues > 0;
  const stepUnknown = reference.steps.some((step) => step.step === null);
  return {
    kind: stated !== null ? "stated" : measured ? "measured" : "modelled",
    width: sizes.width,
    position: sizes.position,
    assumed: scheme !== null && stated === null && (!sizes.outputsKnown || !sizes.inputsKnown || stepUnknown),
    posted: single ? values : null,
    fill: stated === null ? fill : withStated(fill, stated, sizes.width),
  };
}

function exactFill(values: Float64Array, tolerances: Tolerances, sizes: Geometry): Fill {
  // The floor of the block needs the best references; that of the reference's own values stands in for it.
  const floor = Math.max(tolerances.floorAbs, tolerances.floorRel * largestMagnitude(values));
  return (first, last, out) => fillExact(values, sizes.width, floor, first, last, out);
}

function stepFill(reference: ReferenceNumbers, scheme: Scheme, values: Float64Array, sizes: Geometry): Fill {
  const posted = reference.precision ?? NaN;
  const precision = posted > 0 && posted < Infinity ? posted : DEFAULT_PRECISION;
  if (reference.steps.length === 1) {
    const steps = absoluteSteps(reference.steps[0]?.step ?? null, reference.stepKind, scheme, sizes);
    const model = columnModel(scheme, steps, precision, sizes);
    const rowSize = scheme.noisyValues === 0 ? sizes.outputs : rowSizes(values, model, sizes);
    return (first, last, out) => fillSingleStep(values, model, rowSize, sizes, first, last, out);
  }
  const reader = sweepReader(reference.steps, sweepPlan(reference, scheme, sizes));
  return (first, last, out) => fillSweep(reader, scheme, precision, sizes, first, last, out);
}

function withStated(fill: Fill, stated: NonNullable<ReferenceNumbers["uncertainty"]>, width: number): Fill {
  return (first: number, last: number, out: Estimates) => {
    const { odd } = fill(first, last, out);
    return { odd, largest: overrideStated(stated, first * width, (last - first) * width, out) };
  };
}
