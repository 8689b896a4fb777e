import { describe, expect, it } from "vitest";
import { groupClimbs } from "../../../shared/history/groupClimbs.ts";
import type { DriftRise } from "../../../shared/history/groupClimbs.ts";

function rise(more: Partial<DriftRise> = {}): DriftRise {
  return {
    blockId: 1,
    model: "rotor.thrust",
    probe: "",
    columns: 2,
    kind: "climb",
    onset: 10,
    told: 20,
    entries: Uint32Array.of(0, 3),
    decades: 1.2,
    worstEntry: 3,
    ends: [],
    ...more,
  };
}

describe("rises of a lane", () => {
  it("of one model that run at the same time are one climb, spoken for by the worst", () => {
    const worse = rise({ blockId: 2, onset: 18, told: 24, decades: 2, entries: Uint32Array.of(7), worstEntry: 7 });
    const [group, ...others] = groupClimbs([rise(), worse], 30);
    expect(others).toEqual([]);
    expect(group).toMatchObject({ worst: worse, entryCount: 3, openCount: 3, endedAt: null });
  });

  it("of other models, other kinds and other times are climbs of their own, newest first", () => {
    const groups = groupClimbs(
      [rise(), rise({ onset: 21, told: 29 }), rise({ model: "wake.deficit" }), rise({ kind: "jump", onset: 20 })],
      30,
    );
    expect(groups.map(({ model, kind, worst }) => `${worst.told} ${kind} ${model}`)).toEqual([
      "29 climb rotor.thrust",
      "20 climb rotor.thrust",
      "20 climb wake.deficit",
      "20 jump rotor.thrust",
    ]);
  });

  it("are seen as of a build: what was told later is not there, what ended later is open", () => {
    const ended = rise({
      ends: [
        { at: 26, entries: Uint32Array.of(0) },
        { at: 28, entries: Uint32Array.of(3) },
      ],
    });
    expect(groupClimbs([ended], 19)).toEqual([]);
    expect(groupClimbs([ended], 25)).toMatchObject([{ openCount: 2, endedAt: null }]);
    expect(groupClimbs([ended], 27)).toMatchObject([{ openCount: 1, endedAt: null }]);
    expect(groupClimbs([ended], 28)).toMatchObject([{ openCount: 0, endedAt: 28 }]);
  });

  it("that are jumps are over when they are told", () => {
    expect(groupClimbs([rise({ kind: "jump", onset: 20 })], 30)).toMatchObject([{ openCount: 0, endedAt: 20 }]);
  });

  it("that jumped and stayed are told once: as a jump at first, then as the climb it became", () => {
    const jump = rise({ kind: "jump", onset: 16, told: 16 });
    const climb = rise({ onset: 16, told: 19 });
    expect(groupClimbs([jump, climb], 17)).toMatchObject([{ kind: "jump" }]);
    expect(groupClimbs([jump, climb], 20)).toMatchObject([{ kind: "climb", jumped: true }]);
    const partly = rise({ onset: 16, told: 19, entries: Uint32Array.of(0), worstEntry: 0 });
    expect(groupClimbs([jump, partly], 20).map(({ kind }) => kind)).toEqual(["climb", "jump"]);
    expect(groupClimbs([rise()], 20)).toMatchObject([{ jumped: false }]);
  });

  it("of an empty lane are none", () => {
    expect(groupClimbs([], 30)).toEqual([]);
  });
});
