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
