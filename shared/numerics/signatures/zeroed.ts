import { elementwise } from "./elementwise.ts";
import { isKnown } from "./slack.ts";
import type { Candidate } from "./types.ts";
import { subject } from "./words.ts";

/** `term-missing`, where all of it is: a is exactly 0 where r is not. No parameters; whole blocks, lines and entries. */
export const zeroed: Candidate = (trial) => {
  const { derivative } = trial.evidence;
  return elementwise(trial, {
    code: "term-missing",
    parameters: 0,
    fits: (k) => derivative[k] === 0 && isKnown(trial.evidence, k),
    say: (place, explained) =>
      `${subject(trial.evidence, place, explained)} exactly 0 where the reference is not: a term was dropped or never filled in.`,
  });
};
