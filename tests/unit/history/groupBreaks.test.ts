import { describe, expect, it } from "vitest";
import { groupBreaks } from "../../../shared/history/groupBreaks.ts";
import { traceEntries } from "../../../shared/history/traceEntries.ts";
import type { TracedEntries } from "../../../shared/history/types.ts";
import { mulberry32, shuffled } from "../../support/random.ts";
import { graphOf, testsOf } from "./graphs.ts";

const graph = graphOf(["a-b-c-d-e-f-g-h"]);

function traced(blockId: string, entries: number[], good: string, bad: string): TracedEntries[] {
  const found = traceEntries(graph, testsOf(good, bad));
  return found.map((one) => ({ blockId, entries: Uint32Array.from(entries), traced: one }));
}

describe("groupBreaks", () => {
  it("makes one break of entries and blocks with the same onset and suspects", () => {
    const groups = groupBreaks(graph, [
      ...traced("thrust", [4, 9], "bg", "d"),
      ...traced("torque", [0], "b", "de"),
      ...traced("thrust", [2], "bf", "d"),
    ]);
    expect(groups).toEqual([
      {
        onset: "d",
        suspects: ["c", "d"],
        kind: "after-good",
        lastGood: "b",
        fixedBetween: null,
        historyIncomplete: false,
        bad: ["d", "e"],
        repairedBy: null,
        blocks: [
          { blockId: "thrust", entries: Uint32Array.of(2, 4, 9) },
          { blockId: "torque", entries: Uint32Array.of(0) },
        ],
        entryCount: 4,
      },
    ]);
  });

  it("keeps breaks apart that differ in onset or in suspects", () => {
    const groups = groupBreaks(graph, [
      ...traced("x", [0], "a", "d"),
      ...traced("y", [0], "b", "d"),
      ...traced("z", [0], "b", "e"),
    ]);
    expect(groups.map(({ onset, suspects }) => [onset, suspects.join("")])).toEqual([
      ["d", "cd"],
      ["d", "bcd"],
      ["e", "cde"],
    ]);
  });

  it("is repaired when all of its entries are, by the commit at which the last one was", () => {
    const items = [...traced("x", [0], "bf", "d"), ...traced("y", [0], "bg", "d")];
    expect(groupBreaks(graph, items)[0]!.repairedBy).toBe("g");
  });

  it("does not depend on the order of its input", () => {
    const items = [
      ...traced("x", [5], "bf", "dh"),
      ...traced("y", [1], "bg", "d"),
      ...traced("x", [0, 3], "b", "df"),
      ...traced("w", [7], "ag", "h"),
    ];
    const expected = groupBreaks(graph, items);
    for (let seed = 0; seed < 20; seed++) {
      expect(groupBreaks(graph, shuffled(mulberry32(seed), items))).toEqual(expected);
    }
  });

  it("is empty of nothing", () => {
    expect(groupBreaks(graph, [])).toEqual([]);
  });
});
