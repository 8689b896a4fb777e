import { LEAST_SHARE, sampleOf } from "./explain.ts";
import { isWithin, slackOf } from "./slack.ts";
import type { Evidence, Trial } from "./types.ts";

/** Entries whose reference is coarser than this say nothing of a factor. */
const COARSEST = 1e-2;
const COARSEST_OF_MANY = 5e-6;
/** Sharpest entries whose own ratio is tried on the others. */
const HYPOTHESES = 6;
/** No ratio test is looser than this, however coarse the references. */
const LOOSEST = 1e-4;
/** Nor tighter: a factor written with seven digits is still that factor. */
const TIGHTEST = 2e-6;

/** One factor c with a = c r. */
export interface Factor {
  readonly value: number;
  /** Relative: how far the value may be off. */
  readonly uncertainty: number;
}

interface Ratio {
  readonly entry: number;
  readonly value: number;
  readonly uncertainty: number;
}

/**
 * The factor c that most entries of a trial share, a = c r within |c| (U + T): the mean of their ratios, each weighed
 * by how sharp its reference is. Null where fewer than `LEAST_SHARE` share one, or where it is 1, -1 or 0.
 */
export function fitFactor(trial: Trial): Factor | null {
  const { evidence } = trial;
  const sample = sampleOf(trial.entries);
  const ratios = Array.from(sample, (k) => ratioOf(evidence, k))
    .filter((ratio) => ratio !== null)
    .sort((a, b) => a.uncertainty - b.uncertainty);
  if (ratios.length < sample.length * LEAST_SHARE) return null;
  if (trial.width === "entry of many" && ratios[0].uncertainty > COARSEST_OF_MANY) return null;
  for (const hypothesis of ratios.slice(0, HYPOTHESES)) {
    const sharing = ratios.filter(({ entry }) => hasFactor(evidence, entry, hypothesis));
    if (sharing.length < sample.length * LEAST_SHARE) continue;
    const value = weightedMean(sharing);
    const { uncertainty } = hypothesis;
    const trivial = Math.abs(Math.abs(value) - 1) <= 2 * uncertainty;
    return trivial ? null : { value, uncertainty };
  }
  return null;
}

/** True where a = c r within |c| (U + T) and what c itself may be off. */
export function hasFactor(evidence: Evidence, k: number, { value, uncertainty }: Factor): boolean {
  const r = evidence.reference[k];
  const slack = slackOf(evidence, k) + uncertainty * Math.abs(r);
  return isWithin(evidence.derivative[k], value * r, Math.abs(value) * slack);
}

/** How near a fitted factor must be to a known one to be taken for it. */
export function ratioTolerance({ uncertainty }: Factor): number {
  return Math.min(LOOSEST, Math.max(TIGHTEST, 2 * uncertainty));
}

function ratioOf(evidence: Evidence, k: number): Ratio | null {
  const r = evidence.reference[k];
  const value = evidence.derivative[k] / r;
  const size = Math.abs(r);
  const uncertainty = evidence.rtol + (evidence.resolution[k] * Math.max(size, evidence.floor)) / size;
  if (!(uncertainty <= COARSEST) || value === 0 || !(Math.abs(value) < Infinity)) return null;
  return { entry: k, value, uncertainty };
}

function weightedMean(ratios: readonly Ratio[]): number {
  let sum = 0;
  let weights = 0;
  const sharpest = Math.max(ratios[0].uncertainty, Number.MIN_VALUE);
  for (const { value, uncertainty } of ratios) {
    const weight = (sharpest / Math.max(uncertainty, sharpest)) ** 2;
    sum += weight * (value / ratios[0].value);
    weights += weight;
  }
  return ratios[0].value * (sum / weights);
}
