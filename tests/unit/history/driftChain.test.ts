import { describe, expect, it } from "vitest";
import { chainChange } from "../../../server/trace/driftChain.ts";

describe("a chain of builds", () => {
  it.each([
    ["nothing new", [1, 2], [1, 2], [], []],
    ["the first builds", [], [1, 2], [1, 2], []],
    ["a build at the end", [1, 2], [1, 2, 3], [3], []],
    ["a build in between", [1, 3], [1, 2, 3], [], [2]],
    ["another run that speaks now", [1, 2, 3], [1, 4, 3], [], [2, 4]],
    ["a build taken away at the end", [1, 2], [1], [], [2]],
    ["a build before and one at the end", [2, 3], [1, 2, 3, 4], [], [2, 3, 1, 4]],
  ] as const)("with %s", (_name, before, now, appended, disturbed) => {
    const change = chainChange(before, now);
    expect(change.appended).toEqual(appended);
    expect([...change.disturbed].sort()).toEqual([...disturbed].sort());
  });
});
