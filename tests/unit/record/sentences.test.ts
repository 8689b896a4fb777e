import { describe, expect, it } from "vitest";
import { breakSentence, countInWords, modelsInWords } from "../../../server/features/breaks/sentence.ts";
import { isSilent } from "../../../server/features/overview/silentLanes.ts";

describe("the sentence of a break", () => {
  const facts = { kind: "after-good", partials: 3, probes: [], models: ["rotor.thrust"], invalid: false } as const;

  it("is what a person would write", () => {
    expect(breakSentence(facts)).toBe("Three partials of rotor.thrust stopped agreeing here.");
    expect(breakSentence({ ...facts, partials: 1 })).toBe("One partial of rotor.thrust stopped agreeing here.");
    expect(breakSentence({ ...facts, invalid: true })).toBe(
      "Three partials of rotor.thrust became NaN or infinite here.",
    );
  });

  it("does not say that something stopped which was never seen to agree", () => {
    const first = { ...facts, kind: "since-first-check" } as const;
    expect(breakSentence(first)).toBe("Three partials of rotor.thrust have disagreed since the first check.");
    expect(breakSentence({ ...first, partials: 1 })).toBe(
      "One partial of rotor.thrust has disagreed since the first check.",
    );
    expect(breakSentence({ ...first, invalid: true })).toBe(
      "Three partials of rotor.thrust have been NaN or infinite since the first check.",
    );
    expect(breakSentence({ ...facts, kind: "fixed-between", partials: 1 })).toBe(
      "One partial of rotor.thrust disagrees here; another line holds a fix.",
    );
  });

  it("tells probes from partials", () => {
    const probed = (partials: number, ...probes: string[]) => breakSentence({ ...facts, partials, probes });
    expect(probed(0, "dot-product: seed 7")).toBe("Probe dot-product: seed 7 of rotor.thrust stopped agreeing here.");
    expect(probed(0, "taylor: 1", "taylor: 2")).toBe("Two probes of rotor.thrust stopped agreeing here.");
    expect(probed(1, "taylor: 1")).toBe("One partial and one probe of rotor.thrust stopped agreeing here.");
    expect(breakSentence({ ...facts, kind: "since-first-check", partials: 0, probes: ["taylor: 1"] })).toBe(
      "Probe taylor: 1 of rotor.thrust has disagreed since the first check.",
    );
  });

  it("counts in words up to twelve", () => {
    expect([0, 1, 12, 13, 1204].map(countInWords)).toEqual(["no", "one", "twelve", "13", "1,204"]);
  });

  it("names two models, then how many others", () => {
    expect(modelsInWords(["a"])).toBe("a");
    expect(modelsInWords(["a", "b"])).toBe("a and b");
    expect(modelsInWords(["a", "b", "c"])).toBe("a, b and one other");
    expect(modelsInWords(["a", "b", "c", "d"])).toBe("a, b and two others");
  });
});

describe("a silent lane", () => {
  const DAY = 24 * 60 * 60 * 1000;
  const every = (gap: number, count: number) => Array.from({ length: count }, (_, at) => at * gap);
  const last = (moments: readonly number[]) => moments[moments.length - 1] as number;

  it("is one that missed three times its usual gap", () => {
    const weekly = every(7 * DAY, 5);
    expect(isSilent(weekly, last(weekly) + 21 * DAY)).toBe(false);
    expect(isSilent(weekly, last(weekly) + 21 * DAY + 1)).toBe(true);
  });

  it("has a day at least, however lively it was", () => {
    const lively = every(60_000, 50);
    expect(isSilent(lively, last(lively) + DAY)).toBe(false);
    expect(isSilent(lively, last(lively) + DAY + 1)).toBe(true);
  });

  it("goes by the usual gap, not by one long pause", () => {
    const paused = [0, 1, 2, 60, 61].map((day) => day * DAY);
    expect(isSilent(paused, 64.5 * DAY)).toBe(true);
  });

  it("had a rhythm before", () => {
    expect(isSilent([], 1e15)).toBe(false);
    expect(isSilent(every(DAY, 2), 1e15)).toBe(false);
  });
});
