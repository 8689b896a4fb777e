import type { Tolerances } from "../../domain/tolerances.ts";
import type { BestReference } from "../types.ts";

/**
 * Floor of |r| in a block, below which errors are no longer taken relative to the entry itself.
 *
 * Formula: max(floorAbs, floorRel max |r|), the maximum over the entries whose size the reference knows (U <= |r|/2)
 * and that are not in conflict: noise that a useless step blew up would otherwise raise the floor and acquit every
 * other entry.
 * Units: those of the entries. Domain: floors >= 0. Throws: never. NaN policy: unreferenced entries do not count.
 * Source: section 2 of the judging rules.
 */
export function blockFloor(best: Pick<BestReference, "largest">, tolerances: Tolerances): number {
  return Math.max(tolerances.floorAbs, tolerances.floorRel * best.largest);
}
