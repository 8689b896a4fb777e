import { elementwise } from "./elementwise.ts";
import { fitFactor, hasFactor, ratioTolerance } from "./fitFactor.ts";
import type { Factor } from "./fitFactor.ts";
import { plainRatio } from "./plainRatio.ts";
import type { Candidate } from "./types.ts";
import { plainReadings, unitReadings } from "./unitWords.ts";
import { inWords, subject } from "./words.ts";

const MOST_ALTERNATIVES = 3;
/** Within this of a unit's ratio, though not as near as the references can tell: a rounded one, perhaps. */
const ROUNDED = 1e-3;

/**
 * `scaled`: a = c r with a c that is no ratio of units. One parameter, fitted: two entries at least, or a plain c
 * (2, 1/2, -3, 1000). The alternatives say what the factor may come from.
 */
export const scaled: Candidate = (trial) => {
  const { evidence } = trial;
  const factor = fitFactor(trial);
  if (factor === null) return null;
  const size = Math.abs(factor.value);
  const tolerance = ratioTolerance(factor);
  if (factor.value > 0 && unitReadings(size, tolerance, evidence.names).length > 0) return null;
  const plain = plainRatio(size, tolerance);
  if (factor.witnesses < 2 && (plain === null || factor.uncertainty > tolerance)) return null;
  return elementwise(trial, {
    code: "scaled",
    parameters: 1,
    fits: (k) => hasFactor(evidence, k, factor),
    say: (place, explained) => `${subject(evidence, place, explained)} the reference times ${told(factor, plain)}.`,
    alternatives: origins(factor, plain, tolerance, evidence.names),
  });
};

function told({ value }: Factor, plain: string | null): string {
  if (plain === null) return inWords(value);
  const text = value < 0 ? `-${plain}` : plain;
  return /^-?\d+$/.test(text) ? text : `${inWords(value)}, which is ${text}`;
}

function origins(
  { value }: Factor,
  plain: string | null,
  tolerance: number,
  names: Parameters<typeof unitReadings>[2],
): string[] {
  const size = Math.abs(value);
  const readings = plain === null ? unitReadings(size, ROUNDED, names) : plainReadings(size, tolerance);
  const how = plain === null && value > 0 ? "a rounded factor for " : value < 0 ? "the sign flipped, and " : "";
  return readings.slice(0, MOST_ALTERNATIVES).map(({ words }) => `It may be ${how}${words}.`);
}
