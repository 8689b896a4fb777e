import { describe, expect, it } from "vitest";
import { breakStateOn } from "../../../shared/history/breakStateOn.ts";
import { traceEntries } from "../../../shared/history/traceEntries.ts";
import { graphOf, testsOf } from "./graphs.ts";

// Main a-b-c-m-n, a branch b-x-y that is merged by m.
const graph = graphOf({ a: [], b: ["a"], c: ["b"], x: ["b"], y: ["x"], m: ["c", "y"], n: ["m"] });

function stateOn(good: string, bad: string, tip: string) {
  const tests = testsOf(good, bad);
  return breakStateOn(graph, traceEntries(graph, tests)[0]!, tests, tip);
}

describe("breakStateOn", () => {
  it("is absent where the line does not contain the onset", () => {
    expect(stateOn("b", "x", "c")).toBe("absent");
    expect(stateOn("a", "b", "a")).toBe("absent");
  });

  it("is open at the onset and at untested descendants", () => {
    expect(["x", "y", "m", "n"].map((tip) => stateOn("b", "x", tip))).toEqual(["open", "open", "open", "open"]);
  });

  it("is open on one line and repaired on the other", () => {
    expect(["c", "x", "y"].map((tip) => stateOn("ac", "b", tip))).toEqual(["repaired", "open", "open"]);
  });

  it("is open at an untested merge of a repaired and a broken line until that is tested", () => {
    expect(stateOn("ac", "bx", "m")).toBe("open");
    expect(stateOn("acm", "bx", "m")).toBe("repaired");
    expect(stateOn("acm", "bx", "n")).toBe("repaired");
  });

  it("is not reopened by a later break of the same entries", () => {
    expect(stateOn("acm", "bn", "n")).toBe("repaired");
  });

  it("refuses a tip that is not known", () => {
    expect(() => stateOn("a", "b", "gone")).toThrow(RangeError);
  });
});
