import type { Posted } from "./estimator.ts";
import { largestMagnitude } from "./largestMagnitude.ts";

/** The values of a single step as estimates, where the largest stands among them. */
export function postedValues(values: Float64Array): Posted {
  const peak = largestMagnitude(values);
  if (Math.abs(values[peak] ?? 0) < Infinity) return { values, peak };
  const finite = withoutInfinities(values);
  return { values: finite, peak: largestMagnitude(finite) };
}

/** A copy with NaN for what is infinite. */
export function withoutInfinities(values: Float64Array): Float64Array {
  return values.map((value) => (Math.abs(value) < Infinity ? value : NaN));
}
