import { elementwise } from "./elementwise.ts";
import { isWithin, slackOf } from "./slack.ts";
import type { Candidate } from "./types.ts";
import { subject } from "./words.ts";

/** `sign-flipped`: a = -r. No parameters; whole blocks, lines and entries. */
export const signFlipped: Candidate = (trial) => {
  const { derivative, reference } = trial.evidence;
  return elementwise(trial, {
    code: "sign-flipped",
    parameters: 0,
    fits: (k) => isWithin(derivative[k], -reference[k], slackOf(trial.evidence, k)),
    say: (place, explained) => `${subject(trial.evidence, place, explained)} the reference with its sign flipped.`,
  });
};
