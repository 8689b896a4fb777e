import { elementwise } from "./elementwise.ts";
import { LEAST_SHARE } from "./explain.ts";
import type { Candidate } from "./types.ts";
import { subject } from "./words.ts";

/** Largest relative error that rounding to 24 bits, piled up over a calculation, is taken for. */
const LARGEST_ERROR = 1e-4;
/** Bits that a short number (10, 0.25) has at most: that binary32 holds one says nothing. */
const SHORT_BITS = 12;
const SHORTEN = 2 ** (53 - SHORT_BITS) + 1;

/**
 * `single-precision`: a is a number that binary32 holds exactly, as one in 2^29 binary64 numbers is, and off by no
 * more than rounding to 24 bits can pile up to. No parameters; whole blocks, lines and entries. Most of the numbers
 * must need more than 12 bits.
 * Source: IEEE Std 754-2019, table 3.5 (binary32: p = 24).
 */
export const singlePrecision: Candidate = (trial) => {
  const { derivative, reference, floor } = trial.evidence;
  const match = elementwise(trial, {
    code: "single-precision",
    parameters: 0,
    fits: (k) => {
      const a = derivative[k];
      const r = reference[k];
      return a === Math.fround(a) && a !== 0 && Math.abs(a - r) <= LARGEST_ERROR * Math.max(Math.abs(r), floor);
    },
    say: (place, explained) =>
      `${subject(trial.evidence, place, explained)} held exactly by single precision and right to about its 7 digits only: a value passed through a 32-bit number.`,
  });
  if (match === null) return null;
  let long = 0;
  for (const k of match.explained) long += Number(!isShort(derivative[k]));
  return long >= LEAST_SHARE * match.explained.length ? match : null;
};

/** True where the number has at most `SHORT_BITS` bits (splitting after Veltkamp and Dekker). */
function isShort(a: number): boolean {
  const scaled = SHORTEN * a;
  return scaled - (scaled - a) === a;
}
