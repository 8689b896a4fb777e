/**
 * Builds within which a rotation through all columns comes round, whatever their order.
 *
 * The rotation takes columns from the head of a queue: as many as fit into `reserve`, or the first alone where that is
 * dearer. With b columns dearer than the reserve, n others that cost C together and at most c each, the builds are
 *   b + runs + F,  runs = min(b + 1, n)
 * where a run is what stands between two dear columns, each run ends with a build that may be partly empty, and F
 * counts the other, full builds: each holds at least j = floor(reserve / c) columns and costs more than reserve - c,
 * and two that follow each other cost more than reserve together, so that F is at most each of
 *   floor((n - runs) / j),  floor((C - 1) / (reserve - c)),  floor((2 C - 1) / reserve),  and 0 where C <= reserve.
 * It is 1 where all columns together fit into `budget`.
 *
 * Shapes: one cost a column, whole numbers >= 0 of any unit, each at most `budget`; sums stay below 2^51. Domain:
 * 0 < reserve <= budget. Throws: nothing. Cost: one pass.
 * Source: the bin counts of Next Fit, D. S. Johnson, Near-optimal bin packing algorithms, MIT, 1973, sharpened by the
 * number of items a bin holds; the derivation above is complete.
 */
export function rotationPromise(costs: Float64Array, budget: number, reserve: number): number {
  let dear = 0;
  let total = 0;
  let small = 0;
  let dearest = 0;
  for (const cost of costs) {
    total += cost;
    if (cost > reserve) {
      dear += 1;
    } else {
      small += cost;
      dearest = Math.max(dearest, cost);
    }
  }
  if (costs.length === 0) return 0;
  if (total <= budget) return 1;
  const others = costs.length - dear;
  const runs = Math.min(dear + 1, others);
  return dear + runs + fullBuilds(others - runs, small, dearest, reserve);
}

/** Whole numbers below 2^52 divide without a doubt about the floor. */
function fullBuilds(spare: number, small: number, dearest: number, reserve: number): number {
  if (small <= reserve) return 0;
  const byCount = Math.floor(spare / Math.floor(reserve / dearest));
  const byPairs = Math.floor((2 * small - 1) / reserve);
  const byLevel = reserve > dearest ? Math.floor((small - 1) / (reserve - dearest)) : Infinity;
  return Math.min(byCount, byLevel, byPairs);
}
