import { describe, expect, it } from "vitest";
import { assumedEvaluations, costIn, secondsPerEvaluation } from "../../../shared/plan/columnCost.ts";
import { columnValue } from "../../../shared/plan/columnValue.ts";
import type { ColumnFacts } from "../../../shared/plan/columnValue.ts";

const QUIET: ColumnFacts = { broken: 0, climb: 0, changeOdds: 1, checked: true, waited: 0, unresolvedShare: 0 };
const valueOf = (wish: Partial<ColumnFacts>) => columnValue({ ...QUIET, ...wish }, 20);

describe("columnValue", () => {
  it("is nothing for a column that was checked just now", () => {
    expect(valueOf({})).toEqual({ value: 0, reason: "rotation" });
  });

  it("orders reasons: a break before a changed source, that before a change nearby, that before age", () => {
    const order = [{ broken: 1 }, { changeOdds: 24 }, { checked: false }, { changeOdds: 5 }, { unresolvedShare: 1 }];
    const values = [...order, { waited: 10 }].map((wish) => valueOf(wish).value);
    expect(values).toEqual(values.toSorted((a, b) => b - a));
    expect(new Set(values).size).toBe(values.length);
  });

  it("names the weightiest reason and adds the rest", () => {
    const both = valueOf({ broken: 2, changeOdds: 24, waited: 5 });
    expect(both.reason).toBe("open-break");
    expect(both.value).toBeCloseTo(6 + Math.log2(24) + 0.25, 12);
  });

  it.each([
    [{ climb: 0.5 }, "climb"],
    [{ changeOdds: 2 }, "source-changed"],
    [{ checked: false, waited: 30 }, "never-checked"],
    [{ waited: 15 }, "near-limit"],
    [{ waited: 14 }, "rotation"],
    [{ unresolvedShare: 0.5 }, "unresolved"],
  ] as const)("tells %o as %s", (wish, reason) => {
    expect(valueOf(wish).reason).toBe(reason);
  });

  it("does not let one climb outweigh everything for ever", () => {
    expect(valueOf({ climb: 300 }).value).toBe(valueOf({ climb: 3 }).value);
  });
});

describe("costs", () => {
  const told = (seconds: number | null, evaluations: number | null) => ({ seconds, evaluations });

  it("takes two evaluations a step for central differences, one for all else", () => {
    expect(assumedEvaluations("central-difference", 1)).toBe(2);
    expect(assumedEvaluations("central-difference", 5)).toBe(10);
    expect(assumedEvaluations("forward-difference", 5)).toBe(5);
    expect(assumedEvaluations("complex-step", 1)).toBe(1);
    expect(assumedEvaluations("ad-reverse", 0)).toBe(1);
  });

  it("finds the median rate of what told both, and none where nothing did", () => {
    expect(secondsPerEvaluation([told(1, 10), told(3, 10), told(100, 10), told(5, null), told(0, 5)])).toBe(0.3);
    expect(secondsPerEvaluation([told(1, null), told(null, 2)])).toBeNull();
  });

  it("takes what was told in the unit asked for", () => {
    expect(costIn("seconds", told(0.5, 7), 2, 0.1)).toEqual({ cost: 0.5, assumed: false });
    expect(costIn("evaluations", told(0.5, 7), 2, 0.1)).toEqual({ cost: 7, assumed: false });
    expect(costIn("seconds", told(0, null), 2, 0.1)).toEqual({ cost: 0, assumed: false });
  });

  it("converts what was told in the other unit", () => {
    expect(costIn("seconds", told(null, 7), 2, 0.5)).toEqual({ cost: 3.5, assumed: false });
    expect(costIn("evaluations", told(3, null), 2, 0.5)).toEqual({ cost: 6, assumed: false });
  });

  it("says that it assumes where nothing was told, or nothing to convert by", () => {
    expect(costIn("evaluations", null, 2, 0.5)).toEqual({ cost: 2, assumed: true });
    expect(costIn("seconds", null, 2, 0.5)).toEqual({ cost: 1, assumed: true });
    expect(costIn("seconds", told(null, 7), 2, null)).toEqual({ cost: 7, assumed: true });
  });
});
