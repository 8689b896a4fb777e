/**
 * Builds within which a rotation through all columns comes round, whatever their order.
 *
 * The rotation takes columns from the head of a queue until it has spent `reserve`, or the next does not fit into
 * `budget`. With n columns that cost C together and at most c each it takes no more builds than
 *   1 where C <= budget,  n,  ceil(C / reserve),  and ceil(n / ceil(reserve / c)) where c <= reserve.
 * The third: a build that is not the last spends `reserve`, or less than that but with what the next one begins with
 * more than the whole budget; so every build but the last stands for `reserve`, alone or in a pair that stands for two.
 * The fourth: no build but the last ends before `reserve` is spent, which takes so many columns. Columns that cost
 * nothing are taken by every build and count in none of this.
 *
 * Shapes: one cost a column, whole numbers >= 0 of any unit, each at most `budget`; sums stay below 2^53. Domain:
 * 0 < 2 reserve <= budget. Throws: nothing. Cost: one pass.
 */
export function rotationPromise(costs: Float64Array, budget: number, reserve: number): number {
  if (costs.length === 0) return 0;
  let total = 0;
  let paid = 0;
  let dearest = 0;
  for (const cost of costs) {
    total += cost;
    paid += cost > 0 ? 1 : 0;
    dearest = Math.max(dearest, cost);
  }
  if (total <= budget) return 1;
  const byCount = dearest <= reserve ? Math.ceil(paid / Math.ceil(reserve / dearest)) : paid;
  return Math.min(byCount, Math.ceil(total / reserve));
}
