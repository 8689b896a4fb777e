import { MAX_SWEEP_STEPS } from "../../domain/limits.ts";
import type { ReferenceNumbers } from "../types.ts";
import type { Geometry } from "./geometry.ts";

/** Throws RangeError naming the argument when an array of a reference has not the length it must have. */
export function checkReference(reference: ReferenceNumbers, sizes: Geometry, name: string): void {
  const { rows, width } = sizes;
  const count = reference.steps.length;
  if (count < 1 || count > MAX_SWEEP_STEPS) {
    throw new RangeError(`${name}.steps: ${count} steps, expected 1 to ${MAX_SWEEP_STEPS}`);
  }
  const expect = (argument: string, array: Float64Array, length: number) => {
    if (array.length === length) return;
    throw new RangeError(`${name}.${argument}: ${array.length} numbers, expected ${length} (${rows} x ${width})`);
  };
  reference.steps.forEach((step, k) => {
    expect(`steps[${k}].values`, step.values, rows * width);
    if (step.step instanceof Float64Array && step.step.length !== width) {
      throw new RangeError(`${name}.steps[${k}].step: ${step.step.length} numbers, expected ${width}`);
    }
  });
  if (reference.uncertainty instanceof Float64Array) expect("uncertainty", reference.uncertainty, rows * width);
}
