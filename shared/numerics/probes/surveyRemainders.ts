import { DEFAULT_PRECISION } from "../roundoff.ts";
import type { TaylorProbe } from "./types.ts";

/** Remainders of a Taylor probe with what is noise in them. */
export interface Remainders {
  /** Every step, largest first, and |R| of each. */
  readonly steps: readonly number[];
  readonly sizes: readonly number[];
  /** How many of them, from the largest step on, still shrink with the step: the others are on the rounding branch. */
  readonly shrinking: number;
  /** Positions of the shrinking steps whose remainder stands above the noise. */
  readonly usable: readonly number[];
  /** Absolute noise N of a remainder. */
  readonly noise: number;
  /** True where |f| was not posted. */
  readonly assumed: boolean;
}

/** Remainders that shrink slower than h^(1/2) do not come from a difference that goes as h or h^2. */
const SLOWEST = 0.5;

/**
 * Sorts the remainders of a Taylor probe and tells signal from rounding.
 *
 * Formula: N = 2 eta max(|f|, scale), eta the precision of the function's values; then, from the smallest step on, each
 * remainder that is within N, or that shrank slower than h^(1/2) since the next larger step, is on the rounding branch
 * and raises N to its own size. A step is usable where R > N. Without `value`, |f| is taken as the largest of scale and
 * remainders (`assumed`): noise beyond that shows only on the rounding branch.
 *
 * Units: remainders, scale, value and N in the unit of f; steps dimensionless. Domain: finite remainders, positive
 * distinct steps. Throws: never. Scaling f by a power of two scales N by it and changes nothing else.
 */
export function surveyRemainders(probe: TaylorProbe): Remainders {
  const order = probe.steps.map((_, k) => k).sort((a, b) => probe.steps[b]! - probe.steps[a]!);
  const steps = order.map((k) => probe.steps[k]!);
  const sizes = order.map((k) => Math.abs(probe.remainders[k]!));
  const size = probe.value === null ? Math.max(...sizes) : Math.abs(probe.value);
  const floor = 2 * Math.max(probe.precision ?? 0, DEFAULT_PRECISION) * Math.max(size, probe.scale ?? 0);
  let noise = floor;
  let shrinking = steps.length;
  while (shrinking > 0 && isNoise(steps, sizes, shrinking - 1, floor)) {
    shrinking -= 1;
    noise = Math.max(noise, sizes[shrinking]!);
  }
  const usable = steps.map((_, k) => k).filter((k) => k < shrinking && sizes[k]! > noise);
  return { steps, sizes, shrinking, usable, noise, assumed: probe.value === null };
}

function isNoise(steps: readonly number[], sizes: readonly number[], k: number, floor: number): boolean {
  if (sizes[k]! <= floor) return true;
  return k > 0 && sizes[k - 1]! / sizes[k]! < (steps[k - 1]! / steps[k]!) ** SLOWEST;
}
