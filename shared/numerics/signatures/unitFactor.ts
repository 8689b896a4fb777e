import { elementwise } from "./elementwise.ts";
import { fitFactor, hasFactor, ratioTolerance } from "./fitFactor.ts";
import type { Candidate } from "./types.ts";
import { piText, unitReadings } from "./unitWords.ts";
import type { UnitReading } from "./unitWords.ts";
import { inWords, subject } from "./words.ts";

const MOST_ALTERNATIVES = 3;

/**
 * `unit-factor`: a = c r with c the ratio of two units that are mixed up, or its inverse. One parameter, out of a
 * dictionary: a single entry is enough. Ratios that are plain numbers (1000, 2) need a posted unit that makes them
 * likely; else they are `scaled`. The ratio test is never looser than 1e-4; what fits as well is an alternative.
 */
export const unitFactor: Candidate = (trial) => {
  const { evidence } = trial;
  const factor = fitFactor(trial);
  if (factor === null || factor.value < 0) return null;
  const [first, ...others] = unitReadings(factor.value, ratioTolerance(factor), evidence.names);
  if (first === undefined) return null;
  const known = { value: first.ratio, uncertainty: Math.max(factor.uncertainty, ratioTolerance(factor)) };
  return elementwise(trial, {
    code: "unit-factor",
    parameters: 1,
    fits: (k) => hasFactor(evidence, k, known),
    say: (place, explained) => `${subject(evidence, place, explained)} the reference times ${told(first)}.`,
    alternatives: others.slice(0, MOST_ALTERNATIVES).map((other) => `It may also be ${told(other)}.`),
  });
};

function told({ ratio, words }: UnitReading): string {
  const pi = piText(ratio);
  return `${inWords(ratio)}${pi === null ? "" : `, which is ${pi}`}: ${words}`;
}
