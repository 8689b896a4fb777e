import { placeOf } from "./place.ts";
import type { Counting } from "./place.ts";
import type { Evidence, NamedSignature } from "./types.ts";
import { subject } from "./words.ts";

/** `not-finite`: what is NaN or infinite. A fact, not a guess: told beside whatever the finite entries look like. */
export function notFinite(evidence: Evidence, invalid: Int32Array, bad: Counting): NamedSignature | null {
  if (invalid.length === 0) return null;
  const place = placeOf(evidence, invalid);
  let unknown = 0;
  for (const k of invalid) unknown += Number(Number.isNaN(evidence.derivative[k]));
  const what = unknown === invalid.length ? "NaN" : unknown === 0 ? "infinite" : "NaN or infinite";
  return {
    code: "not-finite",
    ...place,
    share: invalid.length / bad(place),
    detail: `${subject(evidence, place, invalid)} ${what}.`,
    alternatives: [],
  };
}
