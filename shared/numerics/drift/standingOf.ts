import { VERDICT_CODE } from "../../domain/vocabulary.ts";
import { STANDING } from "./types.ts";

/**
 * What the numbers of one build tell about the drift of an entry.
 *
 * Silent where the verdict is `disagrees` (that is a break: it must not teach the baseline, and S after a repair must
 * not carry it), `unreferenced` or `invalid`, or where the reference cannot tell; else whether d > U.
 * NaN policy: an error or resolution that is NaN is silent. Throws: never.
 */
export function standingOf(verdict: number, error: number, resolution: number): number {
  if (verdict !== VERDICT_CODE.agrees && verdict !== VERDICT_CODE.unresolved) return STANDING.silent;
  if (!(resolution < Infinity) || Number.isNaN(error)) return STANDING.silent;
  return error > resolution ? STANDING.beyond : STANDING.within;
}
