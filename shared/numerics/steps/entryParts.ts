import { sweepSafety } from "../reference/fillSweep.ts";
import type { SweepChoice, SweepParts } from "../reference/leastSweepError.ts";
import { leastSweepError } from "../reference/leastSweepError.ts";
import type { Scheme } from "../reference/scheme.ts";
import { entrySize, noiseFactor, roundingFactor, truncationFactor, truncationShare } from "../reference/stepModel.ts";
import type { SweepReader } from "../reference/sweepReader.ts";
import { UNIT_ROUNDOFF } from "../roundoff.ts";

/** Steps down to the chosen one whose truncation tells the curvature. */
const TELLING_STEPS = 3;

/** The uncertainty of one entry at each of its steps, safety factors included. */
export interface EntryParts extends SweepParts {
  /** S: the second derivative times L, or the third times L^2, in the unit of the entry. */
  curvature: number;
}

/** What an entry's parts are worked out from. */
export interface EntryFacts {
  readonly scheme: Scheme;
  readonly precision: number;
  /** L of the column and |x|, in the unit of the input. */
  readonly length: number;
  readonly input: number;
  /** |F|, P and N of the row, in the unit of the output. */
  readonly output: number;
  readonly size: number;
  readonly noise: number;
}

export function newEntryParts(steps: number): EntryParts {
  return { truncation: new Float64Array(steps), rounding: new Float64Array(steps), curvature: 0 };
}

const CHOICE: SweepChoice = { index: 0, error: 0 };

/**
 * Truncation and rounding of the entry that the reader read last, at its n >= 1 steps, as `fillSweep` and
 * `fillSingleStep` see them.
 *
 * Formula: differences at two steps or more as in `leastSweepError`, times the safety factor s; the largest step, which
 * has none to be compared with, gets the next one's truncation times the ratio of the steps to the power p. All else
 * from `stepModel`, for a sweep of complex steps with the distance to the smallest step's value added. The curvature S is what the measured truncation says, T / share(h), the least over those of the chosen
 * step and the two before it that are still on the truncation branch: on the other one noise looks like truncation, and
 * S is that of `entrySize`, as far as the noise allows it. Modelled: S of `entrySize`.
 * NaN policy: overflow may leave NaN in a part (it stands for +Infinity). Writes to `parts`, allocates nothing.
 * Returns true where the parts were measured.
 */
export function entryParts(reader: SweepReader, n: number, facts: EntryFacts, parts: EntryParts): boolean {
  if (n < 2 || facts.scheme.noisyValues === 0) {
    modelledParts(reader, n, facts, parts);
    return false;
  }
  measuredParts(reader, n, facts, parts);
  return true;
}

function modelledParts({ values, steps }: SweepReader, n: number, facts: EntryFacts, parts: EntryParts): void {
  const { scheme, precision, length, input, output, size } = facts;
  for (let k = 0; k < n; k += 1) {
    const h = steps[k];
    const m = Math.abs(values[k]);
    const s = entrySize(m, output / length, size / length);
    parts.truncation[k] = s * truncationFactor(scheme, h, precision, length);
    parts.rounding[k] = size * noiseFactor(scheme, h, precision) + m * roundingFactor(scheme, h, input);
    parts.curvature = s;
    // Larger complex steps than the one that is judged with: what they differ from it is truncation.
    if (k < n - 1) parts.truncation[k] += Math.abs(values[k] - values[n - 1]);
  }
}

function measuredParts(reader: SweepReader, n: number, facts: EntryFacts, parts: EntryParts): void {
  const { scheme, input, noise } = facts;
  const { values, steps } = reader;
  leastSweepError(reader, n, scheme, noise, input, CHOICE, parts);
  const ratio = steps[0] / steps[1];
  parts.truncation[0] = parts.truncation[1] * (scheme.order === 1 ? ratio : ratio * ratio);
  const ofValue = Math.abs(values[0]) * UNIT_ROUNDOFF * (input / steps[0] + 4);
  parts.rounding[0] = (scheme.noisyValues * noise) / steps[0] + ofValue;
  parts.curvature = curvatureOf(reader, facts, parts, Math.abs(values[CHOICE.index]));
  const safety = sweepSafety(n);
  for (let k = 0; k < n; k += 1) {
    parts.truncation[k] *= safety;
    parts.rounding[k] *= safety;
  }
}

/** S of the chosen step and the two before it; where they show noise only, that is no more than a bound on the model's. */
function curvatureOf({ steps }: SweepReader, facts: EntryFacts, parts: EntryParts, m: number): number {
  const { scheme, length, output, size } = facts;
  let told = Infinity;
  let bound = Infinity;
  for (let k = Math.max(1, CHOICE.index + 1 - TELLING_STEPS); k <= CHOICE.index; k += 1) {
    const s = parts.truncation[k] / truncationShare(scheme, steps[k], length);
    if (s < bound) bound = s;
    if (s < told && parts.truncation[k] > parts.rounding[k]) told = s;
  }
  return told < Infinity ? told : Math.min(bound, entrySize(m, output / length, size / length));
}
