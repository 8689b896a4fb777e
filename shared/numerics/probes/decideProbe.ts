import type { JudgedProbe } from "./types.ts";

/**
 * Verdict of one comparison under uncertainty, as of an entry.
 *
 * Formula: `agrees` if d + U <= T; `disagrees` if d - g U > T; else `unresolved`.
 * Units: distance d, uncertainty U and tolerance T in one unit; guard factor g >= 1, above 1 where U rests on an
 * assumption. Domain: d, T finite and >= 0; U >= 0 or +Infinity. Throws: never.
 * NaN policy: NaN anywhere leaves it `unresolved`.
 * Source: JCGM 106:2012 (guard bands on both sides), section 2 of the judging rules.
 */
export function decideProbe(
  distance: number,
  uncertainty: number,
  tolerance: number,
  guard = 1,
): Exclude<JudgedProbe["verdict"], "invalid"> {
  if (distance + uncertainty <= tolerance) return "agrees";
  return distance - guard * uncertainty > tolerance ? "disagrees" : "unresolved";
}
