import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { rotationPromise } from "../../../shared/plan/rotationPromise.ts";

/** Builds that a rotation takes through one order of the columns; free ones go with any build. */
function buildsOf(costs: readonly number[], budget: number, reserve: number): number {
  const queue = costs.filter((cost) => cost > 0);
  let builds = 0;
  for (let at = 0; at < queue.length; builds++) {
    let spent = 0;
    while (at < queue.length && spent < reserve && spent + queue[at] <= budget) spent += queue[at++];
  }
  return builds;
}

const promise = (costs: readonly number[], budget: number, reserve = budget / 2) =>
  rotationPromise(Float64Array.from(costs), budget, reserve);

describe("rotationPromise", () => {
  it.each([
    ["no columns", [], 10, 0],
    ["all at once", [3, 3, 4], 10, 1],
    ["columns of the whole budget", [10, 10, 10], 10, 3],
    ["five a build", Array<number>(50).fill(1), 10, 10],
    ["three a build, the third over the half", Array<number>(10).fill(2), 10, 4],
    ["free ones beside dear ones", [0, 0, 0, 10, 10], 10, 2],
    ["dear and cheap ones in turn", [1, 10, 1, 10, 1], 10, 5],
  ])("is right for %s", (_what, costs, budget, expected) => {
    expect(promise(costs, budget)).toBe(expected);
  });

  it("is never fewer builds than the rotation takes, in any order", () => {
    const sized = fc.integer({ min: 2, max: 40 }).chain((half) =>
      fc.record({
        reserve: fc.constant(half),
        costs: fc.array(fc.integer({ min: 0, max: 2 * half }), { minLength: 1, maxLength: 25 }),
      }),
    );
    fc.assert(
      fc.property(sized, ({ reserve, costs }) => {
        if (costs.reduce((a, b) => a + b, 0) <= 2 * reserve) return;
        expect(promise(costs, 2 * reserve)).toBeGreaterThanOrEqual(buildsOf(costs, 2 * reserve, reserve));
      }),
      { numRuns: 5000 },
    );
  });
});
