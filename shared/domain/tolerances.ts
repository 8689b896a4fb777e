import { selects } from "./selector.ts";
import type { JacobianName, Selector } from "./selector.ts";

/** The three numbers a verdict is made with; leads set them per project and per selector. */
export interface Tolerances {
  /** Relative tolerance on |a - r|, dimensionless. */
  readonly rtol: number;
  /** Floor of |r| relative to the largest |r| of the block, dimensionless. */
  readonly floorRel: number;
  /** Absolute floor of |r|, in the unit of the entry. */
  readonly floorAbs: number;
}

/** Defaults of `numerics.md` section 2. */
export const DEFAULT_TOLERANCES: Tolerances = { rtol: 1e-6, floorRel: 1e-3, floorAbs: 1e-12 };

/** Other numbers for the blocks that a selector names; what is left out stays as it is. */
export interface ToleranceRule {
  /** Whole blocks: rows and columns are not looked at. */
  readonly selector: Selector;
  readonly rtol?: number | undefined;
  readonly floorRel?: number | undefined;
  readonly floorAbs?: number | undefined;
}

/** The numbers for one block of a lane: the project's, then every rule that names the block, later ones over earlier. */
export function tolerancesFor(
  base: Tolerances,
  rules: readonly ToleranceRule[],
  block: JacobianName,
  lane: string,
): Tolerances {
  return rules
    .filter(({ selector }) => selects(selector, block, lane))
    .reduce(
      (set, { rtol, floorRel, floorAbs }) => ({
        rtol: rtol ?? set.rtol,
        floorRel: floorRel ?? set.floorRel,
        floorAbs: floorAbs ?? set.floorAbs,
      }),
      base,
    );
}
