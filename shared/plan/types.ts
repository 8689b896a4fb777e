/** One input column of a block, as far as the planning of checks looks. */
export interface PlanColumn {
  readonly block: number;
  /** Zero-based input element. */
  readonly column: number;
  /** What checking it costs, in the unit of the budget: at least 0; Infinity can never be paid. */
  readonly cost: number;
  /** Builds since it was last checked, or since it was first posted where it never was; 0 = by the newest build. */
  readonly waited: number;
  /** What a check is worth now, at least 0; only the ratios count. */
  readonly value: number;
}

/** Indices are those of the columns that were given. */
export interface Plan {
  /** Columns to check in the next build, most worth per cost first. */
  readonly chosen: readonly number[];
  /** Columns that this budget pays in a later build, longest waiting first. */
  readonly left: readonly number[];
  /** Columns that cost more than a whole budget. */
  readonly tooDear: readonly number[];
  /** Sum of the chosen columns' costs. */
  readonly spent: number;
  /** Builds within which every column is checked again; null where one is too dear, 0 of no columns. */
  readonly everyBuilds: number | null;
}
