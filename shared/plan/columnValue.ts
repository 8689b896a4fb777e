import type { PlanReason } from "../domain/vocabulary.ts";

/** What is known of a column when the next build's checks are planned. */
export interface ColumnFacts {
  /** Its entries in open breaks that nobody accepted. */
  readonly broken: number;
  /** Decades of the steepest climb under way among its entries; 0 = none. */
  readonly climb: number;
  /** Odds that a path changed since its last check lends (`pathClue`); 1 = nothing connected changed. */
  readonly changeOdds: number;
  readonly checked: boolean;
  /** Builds since its last check, or since it was first posted. */
  readonly waited: number;
  /** Share of its entries that the last check could not resolve, 0..1. */
  readonly unresolvedShare: number;
}

export interface ColumnValue {
  readonly value: number;
  /** The weightiest part of it. */
  readonly reason: PlanReason;
}

/** Chosen, not measured; only the order that they make counts. A source that changed weighs log2 of its odds, 4.6. */
const WEIGHT = { broken: 6, climb: 3, mostDecades: 3, neverChecked: 4, nearLimit: 3 } as const;
/** Part of the limit after which a column is near it. */
const NEAR = 0.75;

/**
 * What a check of a column is worth, as a sum over the reasons for it, and the reason that weighs most (the first of
 * equal ones in the order of PLAN_REASONS).
 *
 * Formula: 6 where an entry is in an open break; 3 + min(decades, 3) for a climb; log2 of the odds of the changed paths;
 * 4 where it was never checked; 3 where it has waited three quarters of `limit`; the share that was unresolved; and
 * min(1, waited / limit), so that of two equal columns the older one goes first.
 * Units: dimensionless. Domain: numbers >= 0, limit >= 1. Throws: nothing. Cost: constant.
 */
export function columnValue(facts: ColumnFacts, limit: number): ColumnValue {
  const { broken, climb, changeOdds, checked, waited, unresolvedShare } = facts;
  const parts: readonly (readonly [PlanReason, number])[] = [
    ["open-break", broken > 0 ? WEIGHT.broken : 0],
    ["climb", climb > 0 ? WEIGHT.climb + Math.min(climb, WEIGHT.mostDecades) : 0],
    ["source-changed", Math.log2(Math.max(1, changeOdds))],
    ["never-checked", checked ? 0 : WEIGHT.neverChecked],
    ["near-limit", checked && waited >= NEAR * limit ? WEIGHT.nearLimit : 0],
    ["unresolved", unresolvedShare],
    ["rotation", Math.min(1, waited / limit)],
  ];
  const value = parts.reduce((sum, [, weight]) => sum + weight, 0);
  const [reason] = parts.reduce((a, b) => (b[1] > a[1] ? b : a));
  return { value, reason: value === 0 ? "rotation" : reason };
}
