import { elementwise } from "./elementwise.ts";
import { isKnown } from "./slack.ts";
import type { Candidate } from "./types.ts";
import { subject } from "./words.ts";

/**
 * `spurious-term`: a is not 0 where r is 0 within U. What its values are is not explained: one parameter an
 * entry. In a whole block every size counts; a single line
 * or entry must reach the block's floor, because anything at all is "not 0".
 */
export const spuriousTerm: Candidate = (trial) => {
  const { derivative, floor } = trial.evidence;
  const least = trial.width === "block" ? 0 : floor;
  return elementwise(trial, {
    code: "spurious-term",
    parameters: trial.entries.length,
    fits: (k) => !isKnown(trial.evidence, k) && Math.abs(derivative[k]) >= least,
    say: (place, explained) =>
      `${subject(trial.evidence, place, explained)} not 0 where the reference is: a term is there that the model does not have.`,
  });
};
