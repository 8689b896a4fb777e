import { UNIT_ROUNDOFF } from "../roundoff.ts";
import { sampleOf } from "./explain.ts";
import { slackOf } from "./slack.ts";
import type { Candidate, Evidence, Trial } from "./types.ts";
import { inWords, subject } from "./words.ts";

/** Entries of one line that show an absolute size. */
const LEAST_ENTRIES = 4;
/** Errors of one size are within this factor of their geometric mean. */
const SPREAD = 8;
/** Their relative errors must be spread more than the absolute ones, this many times. */
const CLEARER = 2;
/** Far above rounding, and above what the reference cannot see; small beside the line's largest entry. */
const ABOVE_ROUNDING = 1e3 * UNIT_ROUNDOFF;
const BELOW_LARGEST = 1e-2;

/**
 * `uneven-solve`: errors of one absolute size over a row or column of unlike entries, both up and down, far above
 * rounding and small beside the largest entry: an inner solver that stops early stops at one residual. The values
 * are not explained: one parameter an entry; single lines only.
 */
export const unevenSolve: Candidate = (trial) => {
  const { evidence, entries } = trial;
  if (entries.length < LEAST_ENTRIES || trial.width === "entry of many" || !isOneLine(trial)) return null;
  if (isSpread(evidence, sampleOf(entries))) return null;
  const errors = Array.from(entries, (k) => errorAt(evidence, k));
  const size = Math.exp(errors.reduce((sum, error) => sum + Math.log(error), 0) / errors.length);
  const explained = entries.filter((_, at) => errors[at] <= SPREAD * size && errors[at] * SPREAD >= size);
  if (explained.length < entries.length) return null;
  const largest = Array.from(entries).reduce((most, k) => Math.max(most, Math.abs(evidence.reference[k])), 0);
  if (!(size >= ABOVE_ROUNDING * largest && size <= BELOW_LARGEST * largest)) return null;
  if (!isUneven(evidence, entries, errors)) return null;
  return {
    code: "uneven-solve",
    parameters: explained.length,
    explained,
    settled: explained,
    say: (place) =>
      `${subject(evidence, place, explained)} off by about ${inWords(Number(size.toPrecision(2)))} everywhere, up and down, whatever the entry's size: an inner solve may stop early.`,
    alternatives: [],
  };
};

function errorAt({ derivative, reference }: Evidence, k: number): number {
  return Math.abs(derivative[k] - reference[k]);
}

/** True where the errors are not of one size, whatever that is. */
function isSpread(evidence: Evidence, entries: Int32Array): boolean {
  let least = Infinity;
  let most = 0;
  for (const k of entries) {
    least = Math.min(least, errorAt(evidence, k));
    most = Math.max(most, errorAt(evidence, k));
  }
  return most > SPREAD * SPREAD * least;
}

/** All in one row or one column of several entries. */
function isOneLine({ evidence: { columns }, entries }: Trial): boolean {
  const row = Math.floor(entries[0] / columns);
  const column = entries[0] % columns;
  return entries.every((k) => Math.floor(k / columns) === row) || entries.every((k) => k % columns === column);
}

/** Errors of both signs, each well seen, whose sizes differ much less than they do in terms of their entries. */
function isUneven(evidence: Evidence, entries: Int32Array, errors: readonly number[]): boolean {
  const { derivative, reference, floor } = evidence;
  const relative = errors.map((error, at) => error / Math.max(Math.abs(reference[entries[at]]), floor));
  const up = entries.reduce((count, k) => count + Number(derivative[k] > reference[k]), 0);
  const seen = entries.every((k, at) => errors[at] >= 2 * slackOf(evidence, k));
  return seen && up > 0 && up < entries.length && logSpread(relative) >= CLEARER * logSpread(errors);
}

/** Standard deviation of the logarithms. */
function logSpread(values: readonly number[]): number {
  const logs = values.map(Math.log);
  const mean = logs.reduce((sum, one) => sum + one, 0) / logs.length;
  return Math.sqrt(logs.reduce((sum, one) => sum + (one - mean) ** 2, 0) / logs.length);
}
