import { describe, expect, it } from "vitest";
import { matchBreaks, sameParts } from "../../../server/trace/matchBreaks.ts";
import type { KnownBreak } from "../../../server/trace/matchBreaks.ts";
import type { BreakPart } from "../../../server/trace/traceLane.ts";

const part = (blockId: number, entries: number[], columns = 10): BreakPart => ({
  blockId,
  columns,
  entries: Uint32Array.from(entries),
});
const known = (id: number, onset: string, ...parts: BreakPart[]): KnownBreak => ({ id, onset, parts });
const found = (onset: string, bad: string[], ...parts: BreakPart[]) => ({ onset, bad: [onset, ...bad], parts });

/** Ids of the breaks found again, in the order of what was traced, and what became of the others. */
function matched(recorded: KnownBreak[], traced: ReturnType<typeof found>[]) {
  const { recordedOf, gone } = matchBreaks(recorded, traced);
  return {
    ids: recordedOf.map((one) => one?.id ?? null),
    gone: gone.map((one) => [one.recorded.id, one.successor]),
  };
}

describe("matchBreaks", () => {
  it("finds a break by its onset and entries", () => {
    expect(matched([known(1, "c", part(7, [1, 2]))], [found("c", [], part(7, [2, 3]))])).toEqual({
      ids: [1],
      gone: [],
    });
    expect(matched([], [found("c", [], part(7, [1]))])).toEqual({ ids: [null], gone: [] });
  });

  it("takes other entries, blocks and shapes of a block for another break", () => {
    for (const other of [part(7, [3]), part(8, [1]), part(7, [1], 4)]) {
      expect(matched([known(1, "c", part(7, [1]))], [found("c", [], other)])).toEqual({
        ids: [null],
        gone: [[1, null]],
      });
    }
  });

  it("follows an onset that moved back, and not one that lies before a repair", () => {
    expect(matched([known(1, "c", part(7, [1]))], [found("b", ["c"], part(7, [1]))])).toEqual({ ids: [1], gone: [] });
    expect(matched([known(1, "c", part(7, [1]))], [found("e", [], part(7, [1]))])).toEqual({
      ids: [null],
      gone: [[1, null]],
    });
  });

  it("keeps the name of a split break for the part with the same onset, then for the larger one", () => {
    const old = known(1, "c", part(7, [1, 2, 3]));
    expect(matched([old], [found("b", ["c"], part(7, [1, 2])), found("c", [], part(7, [3]))]).ids).toEqual([null, 1]);
    expect(matched([old], [found("a", ["c"], part(7, [3])), found("b", ["c"], part(7, [1, 2]))]).ids).toEqual([
      null,
      1,
    ]);
  });

  it("names joined breaks by the one with the same onset, which the other one is handed to", () => {
    const recorded = [known(1, "b", part(7, [1])), known(2, "c", part(7, [2, 3]))];
    const joined = found("b", ["c"], part(7, [1, 2, 3]));
    expect(matched(recorded, [joined])).toEqual({ ids: [1], gone: [[2, 0]] });
    expect(
      matched(
        [known(1, "d", part(7, [1])), known(2, "c", part(7, [2, 3]))],
        [found("b", ["c", "d"], part(7, [1, 2, 3]))],
      ),
    ).toEqual({
      ids: [2],
      gone: [[1, 0]],
    });
  });

  it("tells equal claims apart by age", () => {
    const recorded = [known(5, "c", part(7, [2])), known(3, "c", part(7, [1]))];
    expect(matched(recorded, [found("c", [], part(7, [1, 2]))])).toEqual({ ids: [3], gone: [[5, 0]] });
  });
});

describe("sameParts", () => {
  it("does not mind the order of blocks, and minds everything else", () => {
    const parts = [part(7, [1, 2]), part(8, [1])];
    expect(sameParts(parts, [part(8, [1]), part(7, [1, 2])])).toBe(true);
    for (const other of [[part(7, [1, 2])], [part(7, [1, 3]), part(8, [1])], [part(7, [1, 2]), part(8, [1], 4)]]) {
      expect(sameParts(parts, other)).toBe(false);
      expect(sameParts(other, parts)).toBe(false);
    }
  });
});
