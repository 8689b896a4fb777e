import type { Estimates } from "./estimator.ts";
import { BLIND, SAW_NO_CHANGE } from "./estimator.ts";
import type { Geometry } from "./geometry.ts";
import { leastSweepError } from "./leastSweepError.ts";
import type { Scheme } from "./scheme.ts";
import { entrySize, noiseFactor, roundingFactor, truncationFactor } from "./stepModel.ts";
import { NOISE_STEPS, surveyRow } from "./surveyRow.ts";
import type { SweepReader } from "./sweepReader.ts";

/** Safety factor s: the noise is measured from four steps on. */
const SAFETY_OF_MANY = 3;
const SAFETY_OF_FEW = 10;

/** Safety factor of an entry with n >= 2 steps. */
export function sweepSafety(n: number): number {
  return n >= NOISE_STEPS ? SAFETY_OF_MANY : SAFETY_OF_FEW;
}

/**
 * Estimates by a sweep of steps: per entry the value with the least error E (`leastSweepError`) and U = s E, s = 3
 * from four steps on, else 10, with the noise N = max(eta P, noise seen in the row) of `surveyRow`. An entry with one
 * step only, and the smallest step of a complex step, are modelled (`stepModel`); an entry without a usable step has
 * U = +Infinity.
 *
 * Shapes: planes of the reader; rows first <= i < last go to the start of `out`.
 * NaN policy: a value that is not finite is left out of its entry; no value at all is no estimate (NaN).
 * Cost: two visits of each posted value; nothing is allocated per entry.
 */
export function fillSweep(
  reader: SweepReader,
  scheme: Scheme,
  precision: number,
  sizes: Geometry,
  first: number,
  last: number,
  out: Estimates,
): number {
  const { width } = sizes;
  const measured = scheme.noisyValues > 0;
  const survey = { noise: 0, size: 0 };
  const choice = { index: 0, error: 0 };
  let odd = 0;
  for (let row = first, k = 0; row < last; row += 1) {
    const value = sizes.outputs[row];
    survey.size = value;
    if (measured) surveyRow(reader, row, sizes, scheme.noisyValues, survey);
    const noise = Math.max(precision * survey.size, survey.noise);
    for (let c = 0; c < width; c += 1, k += 1) {
      const at = row * width + c;
      const n = reader.read(at, c);
      const x = sizes.inputs[c];
      const length = sizes.lengths[c];
      if (n === 0) {
        const step = reader.planes.findIndex((plane) => Number.isFinite(plane[at]));
        const r = reader.planes[step]?.[at] ?? NaN;
        out.value[k] = r;
        out.uncertainty[k] = step < 0 ? NaN : Infinity;
        out.step[k] = Math.max(step, 0);
        if (r === 0) out.unchanged[k] = BLIND;
        if (!(Math.abs(r) > 0)) odd += 1;
        continue;
      }
      let u: number;
      if (measured && n > 1) {
        leastSweepError(reader, n, scheme, noise, x, choice);
        u = choice.error * sweepSafety(n);
      } else {
        choice.index = n - 1;
        const h = reader.steps[n - 1];
        const m = Math.abs(reader.values[n - 1]);
        u = entrySize(m, value / length, survey.size / length) * truncationFactor(scheme, h, precision, length);
        u += survey.size * noiseFactor(scheme, h, precision) + m * roundingFactor(scheme, h, x);
      }
      const r = reader.values[choice.index];
      out.value[k] = r;
      out.uncertainty[k] = u;
      out.step[k] = reader.posted[choice.index];
      if (r !== 0 || !allZero(reader.values, n)) continue;
      odd += 1;
      const sees = noiseFactor(scheme, reader.steps[0], precision) * length <= 1;
      out.unchanged[k] = sees ? SAW_NO_CHANGE : BLIND;
    }
  }
  return odd;
}

function allZero(values: Float64Array, n: number): boolean {
  for (let k = 0; k < n; k += 1) if (values[k] !== 0) return false;
  return true;
}
