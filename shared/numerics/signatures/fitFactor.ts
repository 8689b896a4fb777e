import { LEAST_SHARE, sampleOf } from "./explain.ts";
import { isWithin, slackOf } from "./slack.ts";
import type { Evidence, Trial } from "./types.ts";

/** Entries whose reference is coarser than this say nothing of a factor. */
const COARSEST = 1e-2;
/** Part of the entries whose references must be sharp enough to fit a factor; the others must bear it out. */
const LEAST_SHARP = 0.1;
/**
 * A factor must be so many uncertainties away from 1 and -1: small errors of any kind are all near 1, and that they
 * are is no factor that they share.
 */
const CLEAR_OF_ONE = 20;
/** Where many single entries are tried one fits something by chance, unless the references are this sharp. */
const COARSEST_OF_MANY = 5e-6;
/** Sharpest entries whose own ratio is tried on the others. */
const HYPOTHESES = 4;
/** No ratio test is looser than this, however coarse the references. */
const LOOSEST = 1e-4;
/** Nor tighter: a factor written with seven digits is still that factor. */
const TIGHTEST = 2e-6;

/** One factor c with a = c r. */
export interface Factor {
  readonly value: number;
  /** Relative: how far the value may be off. */
  readonly uncertainty: number;
  /** Entries of the sample that say so sharply. */
  readonly witnesses: number;
}

const FITTED = new WeakMap<Trial, { readonly factor: Factor | null }>();

/**
 * The factor c that most sharp entries of a trial share, a = c r within |c| (U + T): the mean of their ratios, each
 * weighed by how sharp its reference is. Null where fewer than `LEAST_SHARE` of them share one, or it is 1, -1 or 0.
 * Fitted once for each trial, on a sample of its entries.
 */
export function fitFactor(trial: Trial): Factor | null {
  const known = FITTED.get(trial);
  if (known !== undefined) return known.factor;
  const factor = fit(trial);
  FITTED.set(trial, { factor });
  return factor;
}

function fit({ evidence, entries, width }: Trial): Factor | null {
  const sample = sampleOf(entries);
  const blurs = Float64Array.from(sample, (k) => blurOf(evidence, k));
  const sharp = blurs.reduce((count, blur) => count + Number(blur <= COARSEST), 0);
  if (sharp < sample.length * LEAST_SHARP) return null;
  const tried = new Set<number>();
  for (let h = 0; h < HYPOTHESES && h < sharp; h += 1) {
    const best = sharpest(blurs, tried);
    tried.add(best);
    const uncertainty = blurs[best];
    if (width === "entry of many" && uncertainty > COARSEST_OF_MANY) return null;
    const value = ratioOf(evidence, sample[best]);
    const sharing = sample.filter((k, s) => blurs[s] <= COARSEST && hasFactor(evidence, k, { value, uncertainty }));
    if (sharing.length < sharp * LEAST_SHARE) continue;
    const mean = weightedMean(evidence, sharing, uncertainty);
    return Math.abs(Math.abs(mean) - 1) <= CLEAR_OF_ONE * uncertainty
      ? null
      : { value: mean, uncertainty, witnesses: sharing.length };
  }
  return null;
}

/** True where a = c r within |c| (U + T) and what c itself may be off. */
export function hasFactor(evidence: Evidence, k: number, { value, uncertainty }: Omit<Factor, "witnesses">): boolean {
  const r = evidence.reference[k];
  const slack = slackOf(evidence, k) + uncertainty * Math.abs(r);
  return isWithin(evidence.derivative[k], value * r, Math.abs(value) * slack);
}

/** How near a fitted factor must be to a known one to be taken for it. */
export function ratioTolerance({ uncertainty }: Factor): number {
  return Math.min(LOOSEST, Math.max(TIGHTEST, 2 * uncertainty));
}

function ratioOf({ derivative, reference }: Evidence, k: number): number {
  return derivative[k] / reference[k];
}

/** How far the ratio of an entry may be off, relative; NaN or infinite where it has none. */
function blurOf(evidence: Evidence, k: number): number {
  const size = Math.abs(evidence.reference[k]);
  const ratio = ratioOf(evidence, k);
  if (ratio === 0 || !(Math.abs(ratio) < Infinity)) return NaN;
  return evidence.rtol + (evidence.resolution[k] * Math.max(size, evidence.floor)) / size;
}

function sharpest(blurs: Float64Array, not: ReadonlySet<number>): number {
  let best = -1;
  blurs.forEach((blur, s) => {
    if (!not.has(s) && blur <= COARSEST && (best < 0 || blur < blurs[best])) best = s;
  });
  return best;
}

function weightedMean(evidence: Evidence, entries: Int32Array, sharpestBlur: number): number {
  const first = ratioOf(evidence, entries[0]);
  let sum = 0;
  let weights = 0;
  for (const k of entries) {
    const weight = sharpestBlur === 0 ? 1 : (sharpestBlur / Math.max(blurOf(evidence, k), sharpestBlur)) ** 2;
    sum += weight * (ratioOf(evidence, k) / first);
    weights += weight;
  }
  return first * (sum / weights);
}
