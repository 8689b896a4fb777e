import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { planChecks } from "../../../shared/plan/planChecks.ts";
import type { Plan, PlanColumn } from "../../../shared/plan/types.ts";
import { mulberry32, shuffled } from "../../support/random.ts";
import { simulateBuilds } from "./simulate.ts";
import type { SimulatedColumn } from "./simulate.ts";

const columnOf = (column: number, wish: Partial<PlanColumn> = {}): PlanColumn => ({
  block: 1,
  column,
  cost: 1,
  waited: 0,
  value: 0,
  ...wish,
});
const equal = (count: number) => Array.from({ length: count }, (_, at) => columnOf(at));

describe("planChecks", () => {
  it("takes all where the budget pays all", () => {
    const plan = planChecks(equal(10), 10);
    expect(plan).toMatchObject({ left: [], tooDear: [], spent: 10, everyBuilds: 1 });
    expect(plan.chosen).toHaveLength(10);
  });

  it("keeps half for the rotation and spends half where it is worth most", () => {
    const columns = equal(10).map((one) => ({ ...one, waited: one.column, value: one.column === 0 ? 5 : 0 }));
    const plan = planChecks(columns, 2);
    // Column 9 has waited longest; column 0 is worth most.
    expect(plan.chosen).toEqual([0, 9]);
    expect(plan.everyBuilds).toBe(10);
  });

  it("fits costs that no binary number is, exactly", () => {
    const plan = planChecks(
      equal(10).map((one) => ({ ...one, cost: 0.1 })),
      1,
    );
    expect(plan.chosen).toHaveLength(10);
  });

  it("spends by value per cost, not by value", () => {
    const columns = [columnOf(0, { cost: 4, value: 4 }), ...[1, 2, 3, 4].map((at) => columnOf(at, { value: 3 }))];
    const plan = planChecks([...columns, columnOf(5, { waited: 9, cost: 4 })], 8);
    expect(plan.chosen).toEqual([1, 2, 3, 4, 5]);
    expect(plan.left).toEqual([0]);
  });

  it("passes over what no longer fits and takes what does", () => {
    const columns = [
      columnOf(0, { waited: 9, cost: 5 }),
      columnOf(1, { cost: 6, value: 12 }),
      columnOf(2, { cost: 4 }),
    ];
    expect(planChecks(columns, 10).chosen).toEqual([0, 2]);
  });

  it("lists what a whole budget does not pay, and promises nothing then", () => {
    const plan = planChecks([...equal(3), columnOf(3, { cost: 5 }), columnOf(4, { cost: Infinity })], 4);
    expect(plan).toMatchObject({ tooDear: [3, 4], everyBuilds: null });
    expect(plan.chosen).toHaveLength(3);
  });

  it("checks a column that costs the whole budget when its turn comes", () => {
    const plan = planChecks([columnOf(0, { cost: 4, waited: 3 }), columnOf(1, { value: 9 })], 4);
    expect(plan).toMatchObject({ chosen: [0], left: [1], everyBuilds: 2 });
  });

  it("takes what costs nothing, whatever it is worth", () => {
    const free = [columnOf(0, { cost: 0 }), columnOf(1, { cost: 0, value: 2 }), columnOf(2, { cost: 3, value: 9 })];
    expect(planChecks(free, 1).chosen).toEqual([1, 0]);
  });

  it("has an answer for no columns", () => {
    expect(planChecks([], 1)).toEqual({ chosen: [], left: [], tooDear: [], spent: 0, everyBuilds: 0 });
  });

  it.each([0, -1, NaN, Infinity])("refuses a budget of %s", (budget) => {
    expect(() => planChecks([], budget)).toThrow(RangeError);
  });

  it.each([{ cost: NaN }, { cost: -1 }, { waited: -1 }, { waited: Infinity }, { value: NaN }, { value: Infinity }])(
    "refuses %o, naming the column",
    (wish) => {
      expect(() => planChecks([columnOf(7, wish)], 1)).toThrow(/column 7 of block 1/);
    },
  );

  it.each([5e-324, 1e-300, 1, 1e300])("plans the same whatever the unit of cost: %s", (unit) => {
    const wished = equal(6).map((one) => ({ ...one, cost: one.column + 1, waited: one.column % 3, value: one.column }));
    const scaled = wished.map((one) => ({ ...one, cost: one.cost * unit }));
    expect(planChecks(scaled, 12 * unit).chosen).toEqual(planChecks(wished, 12).chosen);
  });

  it("does not depend on the order of the columns", () => {
    const random = mulberry32(11);
    const columns = Array.from({ length: 400 }, (_, at) =>
      columnOf(at, {
        block: at % 7,
        cost: 1 + Math.floor(random() * 3),
        waited: Math.floor(random() * 4),
        value: Math.floor(random() * 3),
      }),
    );
    const name = (list: readonly PlanColumn[], plan: Plan) =>
      [plan.chosen, plan.left].map((part) => part.map((at) => `${list[at].block}/${list[at].column}`));
    const other = shuffled(random, columns);
    expect(name(other, planChecks(other, 60))).toEqual(name(columns, planChecks(columns, 60)));
  });

  it("plans 100,000 columns", () => {
    const random = mulberry32(5);
    const columns = Array.from({ length: 100_000 }, (_, at) =>
      columnOf(at, { cost: random(), waited: Math.floor(random() * 50), value: random() }),
    );
    const plan = planChecks(columns, 2000);
    expect(plan.chosen.length + plan.left.length).toBe(100_000);
    expect(plan.spent).toBeGreaterThan(1999);
    expect(plan.spent).toBeLessThanOrEqual(2000 * (1 + 1e-6));
  });
});

const cost = fc.oneof(fc.double({ min: 0.01, max: 1, noNaN: true }), fc.constantFrom(0, 0.1, 0.25, 0.5, 1));
const simulatedColumns = (most: number) =>
  fc.array(cost, { minLength: 1, maxLength: most }).map((costs) => costs.map((one, column) => ({ cost: one, column })));

describe("the promise", () => {
  const columns = simulatedColumns(30).map((list) => list.map((one) => ({ ...one, block: 1 })));
  const seed = fc.integer();
  const share = fc.double({ min: 1, max: 12, noNaN: true });

  it("holds whatever is urgent, with new blocks on the way", () => {
    fc.assert(
      fc.property(columns, share, seed, fc.boolean(), (list, times, start, adverse) => {
        const random = mulberry32(start);
        const { faults } = simulateBuilds({
          columns: list,
          budget: times,
          builds: 90,
          // The worst that values can do: everything just checked is wanted again, the longest waiting never.
          value: (_column, waited) => (adverse ? 1 / (1 + waited) ** 4 : random() * 10),
          newcomers: (build) =>
            build < 40 && random() < 0.2
              ? Array.from({ length: 3 }, (_, column) => ({ block: 1 - build, column, cost: random() }))
              : [],
        });
        expect(faults).toEqual([]);
      }),
      { numRuns: 150 },
    );
  });

  it("is not much longer than what columns wait at worst", () => {
    const list: SimulatedColumn[] = Array.from({ length: 10 }, (_, column) => ({ block: 1, column, cost: 1 }));
    const { longest, last, faults } = simulateBuilds({
      columns: list,
      budget: 4,
      builds: 60,
      value: (_column, waited) => 1 / (1 + waited) ** 4,
      newcomers: () => [],
    });
    expect(faults).toEqual([]);
    expect(last.everyBuilds).toBe(5);
    // Two columns are urgent for ever, so that the other eight go round.
    expect(longest).toBe(4);
  });

  it("never exceeds one column a build, and is at least what the money says", () => {
    fc.assert(
      fc.property(columns, share, (list, budget) => {
        const plan = planChecks(
          list.map((one) => ({ ...one, waited: 0, value: 0 })),
          budget,
        );
        const total = list.reduce((sum, one) => sum + one.cost, 0);
        expect(plan.everyBuilds).toBeLessThanOrEqual(list.length);
        expect(plan.everyBuilds).toBeGreaterThanOrEqual(Math.floor(total / budget));
      }),
    );
  });
});
