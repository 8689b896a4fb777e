import type { ReferenceNumbers } from "../types.ts";
import { absoluteSteps } from "./absoluteSteps.ts";
import type { Geometry } from "./geometry.ts";
import type { Scheme } from "./scheme.ts";

/** The steps of a sweep, sorted per covered column from the largest down; equal and unusable ones left out. */
export interface SweepPlan {
  /** Posted steps K; the stride of `steps` and `posted`. */
  readonly stride: number;
  /** Usable steps per column. */
  readonly counts: Uint8Array;
  /** Absolute steps, column by column, largest first. */
  readonly steps: Float64Array;
  /** Index of each as posted. */
  readonly posted: Uint8Array;
}

/** Sorts a sweep that may have been posted in any order. Cost: O(columns K log K), once a reference. */
export function sweepPlan(reference: ReferenceNumbers, scheme: Scheme, sizes: Geometry): SweepPlan {
  const stride = reference.steps.length;
  const { width } = sizes;
  const absolute = reference.steps.map((step) => absoluteSteps(step.step, reference.stepKind, scheme, sizes));
  const counts = new Uint8Array(width);
  const steps = new Float64Array(width * stride);
  const posted = new Uint8Array(width * stride);
  const order: number[] = [];
  for (let c = 0; c < width; c += 1) {
    const size = (k: number) => absolute[k]?.[c] ?? NaN;
    order.length = 0;
    for (let k = 0; k < stride; k += 1) if (size(k) > 0) order.push(k);
    order.sort((a, b) => size(b) - size(a));
    let count = 0;
    for (const k of order) {
      if (count > 0 && size(k) === steps[c * stride + count - 1]) continue;
      steps[c * stride + count] = size(k);
      posted[c * stride + count] = k;
      count += 1;
    }
    counts[c] = count;
  }
  return { stride, counts, steps, posted };
}
