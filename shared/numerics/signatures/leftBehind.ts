import { isBadVerdict, VERDICT_CODE } from "../../domain/vocabulary.ts";
import { explain } from "./explain.ts";
import { countingOf, placeOf } from "./place.ts";
import { isWithin, slackOf } from "./slack.ts";
import type { BlockNames, Evidence, NamedSignature } from "./types.ts";
import { subject } from "./words.ts";

/** The planes of a build that a derivative may have been left behind in. */
export interface LeftBehindNow {
  readonly derivative: Float64Array;
  readonly reference: Float64Array;
  /** U / max(|r|, floor). */
  readonly resolution: Float32Array;
  readonly floor: number;
  readonly verdict: Uint8Array;
}

/**
 * `left-behind`: what disagrees is the reference of the build before, while the reference has moved since: the model
 * changed and its derivative did not.
 *
 * Formula: |a - r'| <= U + rtol max(|r'|, floor) where |r - r'| > U + rtol max(|r|, floor); told where it holds for at
 * least 0.8 of the disagreeing entries whose reference moved; `share` is of all that is bad in the place.
 * Shapes: rows x columns, row-major. Units: those of the entries. Throws: RangeError naming the plane whose length is
 * not rows x columns. NaN policy: an entry without a reference on either side is not looked at.
 * Source: section 5 of the judging rules.
 */
export function leftBehind(
  now: LeftBehindNow,
  before: { readonly reference: Float64Array },
  rtol: number,
  rows: number,
  columns: number,
  names: BlockNames,
): NamedSignature | null {
  checkLengths(now, before, rows * columns);
  const evidence: Evidence = { ...now, rows, columns, rtol, names };
  const bad = entriesWhere(now.verdict, isBadVerdict);
  const moved = bad.filter((k) => {
    const change = Math.abs(now.reference[k] - before.reference[k]);
    return now.verdict[k] === VERDICT_CODE.disagrees && change > slackOf(evidence, k);
  });
  const explanation = explain(moved, (k) => {
    const old = before.reference[k];
    const slack = slackOf(evidence, k) + rtol * Math.max(0, Math.abs(old) - Math.abs(now.reference[k]));
    return isWithin(now.derivative[k], old, slack);
  });
  if (explanation === null) return null;
  const { explained } = explanation;
  const place = placeOf(evidence, explained);
  return {
    code: "left-behind",
    ...place,
    share: explained.length / countingOf(evidence, bad)(place),
    detail: `${subject(evidence, place, explained)} where the reference was at the build before: the model moved and its derivative was left behind.`,
    alternatives: [],
  };
}

function entriesWhere(verdict: Uint8Array, holds: (code: number) => boolean): Int32Array {
  let count = 0;
  for (const code of verdict) count += Number(holds(code));
  const entries = new Int32Array(count);
  let at = 0;
  verdict.forEach((code, k) => {
    if (holds(code)) entries[at++] = k;
  });
  return entries;
}

function checkLengths(now: LeftBehindNow, before: { readonly reference: Float64Array }, entries: number): void {
  const expect = (name: string, length: number) => {
    if (length !== entries) throw new RangeError(`${name}: ${length} numbers, expected ${entries}`);
  };
  expect("now.derivative", now.derivative.length);
  expect("now.reference", now.reference.length);
  expect("now.resolution", now.resolution.length);
  expect("now.verdict", now.verdict.length);
  expect("before.reference", before.reference.length);
}
