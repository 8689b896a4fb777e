/** The running state against the definition for one entry, and what is promised of quiet states and packed ones. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { VERDICT_CODE } from "../../shared/domain/vocabulary.ts";
import { advanceDrift } from "../../shared/numerics/drift/advanceDrift.ts";
import { driftSeries } from "../../shared/numerics/drift/driftSeries.ts";
import { isQuiet } from "../../shared/numerics/drift/isQuiet.ts";
import { newDriftState } from "../../shared/numerics/drift/newDriftState.ts";
import { packDrift } from "../../shared/numerics/drift/packDrift.ts";
import { resizeDrift } from "../../shared/numerics/drift/resizeDrift.ts";
import { restartDrift } from "../../shared/numerics/drift/restartDrift.ts";
import type { DriftEvents, DriftItem, DriftState } from "../../shared/numerics/drift/types.ts";
import { unpackDrift } from "../../shared/numerics/drift/unpackDrift.ts";
import { histories, playHistory } from "./support/driftHistories.ts";
import { itemOf, valuesOf } from "./support/driftTrials.ts";

/** Properties over whole histories take seconds on a busy machine. */
const PATIENCE = 60_000;

const build = (...g: number[]): ReturnType<typeof valuesOf> => valuesOf(g.map((value) => itemOf(value)));
const count = ({ climbs, jumps, ends }: DriftEvents): number[] =>
  [climbs, jumps, ends].map(({ entries }) => entries.length);

/** A state of entries that lie so high (in decades over their baseline) since the last of 20 builds. */
function settled(...drifts: number[]): DriftState {
  const state = newDriftState(drifts.length);
  for (let id = 1; id <= 20; id += 1) advanceDrift(state, id, build(...drifts.map(() => -9)));
  advanceDrift(state, 21, build(...drifts.map((drift) => -9 + drift)));
  return state;
}

describe("the running state", () => {
  it("tells what the definition tells, to the last bit, whatever happens on the way", { timeout: PATIENCE }, () => {
    const told = { climb: 0, jump: 0, end: 0, null: 0 };
    fc.assert(
      fc.property(histories, (history) => {
        const played = playHistory(history);
        played.entries.forEach(({ items, restarts, points }) => {
          const expected = driftSeries(items, restarts);
          expect(points).toEqual(expected.map((point) => point && { cusum: point.cusum, event: point.event }));
          for (const point of expected) if (point) told[point.event ?? "null"] += 1;
        });
      }),
      { numRuns: 100 },
    );
    for (const times of Object.values(told)) expect(times).toBeGreaterThan(20);
  });

  it("tells a climb with its onset, its drift, and its end with the same onset", () => {
    const state = newDriftState(2);
    const climbs: unknown[] = [];
    const ends: unknown[] = [];
    for (let id = 101; id <= 150; id += 1) {
      const g = id <= 120 ? -9 : id <= 140 ? -9 + 0.1 * (id - 120) : -9;
      const events = advanceDrift(state, id, build(-9, g));
      events.climbs.entries.forEach((k, i) => climbs.push([id, k, events.climbs.onsets[i], events.climbs.decades[i]]));
      events.ends.entries.forEach((k, i) => ends.push([id, k, events.ends.onsets[i], events.ends.decades[i]]));
    }
    expect(climbs).toEqual([[131, 1, 121, expect.closeTo(1.1, 2)]]);
    expect(ends).toEqual([[143, 1, 121, expect.closeTo(0, 2)]]);
  });

  it("tells a jump with the build and the rise", () => {
    const state = settled(0, 0);
    const { jumps } = advanceDrift(state, 22, build(-7.5, -9));
    expect(jumps).toEqual({
      entries: Uint32Array.of(0),
      onsets: Int32Array.of(22),
      decades: Float32Array.of(1536 / 1024),
    });
  });

  it("counts a repeated build after one that said nothing as saying nothing", () => {
    const silent: DriftItem = itemOf(-9, { verdict: VERDICT_CODE.unreferenced, resolution: NaN });
    const state = newDriftState(1);
    advanceDrift(state, 1, build(-9));
    advanceDrift(state, 2, valuesOf([silent]));
    advanceDrift(state, 3, null);
    expect(state.count[0]).toBe(1);
  });

  it("keeps a window only while a baseline is unfinished", () => {
    const state = newDriftState(2);
    expect(state.window).toBeNull();
    for (let id = 1; id <= 19; id += 1) advanceDrift(state, id, build(-9, -8));
    expect(state.window).toHaveLength(40);
    advanceDrift(state, 20, null);
    expect(state.window).toBeNull();
    restartDrift(state, Uint32Array.of(1));
    advanceDrift(state, 21, null);
    expect(state.window).toHaveLength(40);
    expect([...state.count]).toEqual([20, 1]);
  });

  it("takes blocks of no entries", () => {
    const state = newDriftState(0);
    expect(count(advanceDrift(state, 1, build()))).toEqual([0, 0, 0]);
    expect(isQuiet(state)).toBe(true);
    expect(unpackDrift(packDrift(state))).toEqual(state);
    expect(restartDrift(state, null)).toEqual(new Uint32Array());
  });

  it("refuses planes of another length, entries that are none, and repeats that may tell something", () => {
    const state = newDriftState(2);
    expect(() => advanceDrift(state, 1, build(-9))).toThrow(/^derivative: 1 numbers, expected 2/);
    const short = { ...build(-9, -9), verdict: new Uint8Array(3) };
    expect(() => advanceDrift(state, 1, short)).toThrow(/^verdict: 3 numbers, expected 2/);
    expect(() => advanceDrift(state, 1, build(-9, -9), 2)).toThrow(/^times: 2/);
    expect(() => advanceDrift(settled(3), 22, null, 2)).toThrow(/^times: 2/);
    for (const times of [0, -1, 1.5, NaN]) expect(() => advanceDrift(state, 1, null, times)).toThrow(/^times: /);
    for (const entries of [-1, 0.5, NaN]) expect(() => newDriftState(entries)).toThrow(/^entries: /);
    expect(() => resizeDrift(state, -1)).toThrow(/^entries: /);
    expect(() => restartDrift(state, Uint32Array.of(2))).toThrow(/^entries: 2/);
  });
});

describe("a restart", () => {
  it("ends climbs of the chosen entries only, and says which", () => {
    const state = settled(2, 2, 0);
    for (let id = 22; id <= 30; id += 1) advanceDrift(state, id, null);
    expect([...state.climbing]).toEqual([1, 1, 0]);
    expect(restartDrift(state, Uint32Array.of(1, 2))).toEqual(Uint32Array.of(1));
    expect([...state.climbing]).toEqual([1, 0, 0]);
    expect([...state.count]).toEqual([20, 0, 0]);
    expect(restartDrift(state, null)).toEqual(Uint32Array.of(0));
  });
});

describe("a quiet state", () => {
  it.each([
    ["at its centre", settled(0), true],
    ["under it", settled(-2), true],
    ["a little above, within the allowance", settled(0.07), true],
    ["above, less than a decade", settled(0.5), true],
    ["above, more than a decade", settled(1.5), false],
    ["one among many", settled(0, 0, 1.5, 0), false],
  ])("%s", (_, state, quiet) => {
    expect(isQuiet(state)).toBe(quiet);
  });

  it("is one of a climb that stays where it is, and not of one that came down", () => {
    const state = settled(2);
    for (let id = 22; id <= 30; id += 1) advanceDrift(state, id, null);
    expect(isQuiet(state)).toBe(true);
    advanceDrift(state, 31, build(-9));
    expect(isQuiet(state)).toBe(false);
  });

  it("is none just after the end of a climb above the centre, as a repeat begins an onset", () => {
    const state = settled(2);
    for (let id = 22; id <= 30; id += 1) advanceDrift(state, id, null);
    for (let id = 31; id <= 33; id += 1) advanceDrift(state, id, build(-8.7));
    expect([state.climbing[0], state.cusum[0], isQuiet(state)]).toEqual([0, 0, false]);
    advanceDrift(state, 34, null);
    expect([state.onset[0], isQuiet(state)]).toEqual([34, true]);
  });

  it("tells nothing however often it is repeated, and repeats can be taken at once", { timeout: PATIENCE }, () => {
    let quiet = 0;
    fc.assert(
      fc.property(histories, fc.integer({ min: 2, max: 60 }), (history, times) => {
        const { state } = playHistory(history);
        if (!isQuiet(state)) return;
        quiet += 1;
        const [one, other] = [unpackDrift(packDrift(state)), unpackDrift(packDrift(state))];
        for (let n = 1; n <= times; n += 1) expect(count(advanceDrift(one, 9000 + n, null))).toEqual([0, 0, 0]);
        expect(count(advanceDrift(other, 9000 + times, null, times))).toEqual([0, 0, 0]);
        expect(other).toEqual(one);
        expect([...one.onset].filter((onset) => onset >= 9000)).toEqual([]);
      }),
      { numRuns: 150 },
    );
    expect(quiet).toBeGreaterThan(20);
  });
});

describe("packed and resized states", () => {
  it("come back as they were, wherever the bytes lie", { timeout: PATIENCE }, () => {
    fc.assert(
      fc.property(histories, fc.integer({ min: 0, max: 3 }), (history, offset) => {
        const { state } = playHistory(history);
        const packed = packDrift(state);
        const moved = new Uint8Array(packed.length + offset);
        moved.set(packed, offset);
        expect(unpackDrift(moved.subarray(offset))).toEqual(state);
      }),
      { numRuns: 50 },
    );
  });

  it("are refused when the bytes are cut, too long, or of another version", () => {
    const packed = packDrift(settled(0, 1));
    expect(() => unpackDrift(packed.slice(0, 5))).toThrow(/^bytes: 5/);
    expect(() => unpackDrift(packed.slice(0, -1))).toThrow(/^bytes: /);
    expect(() => unpackDrift(Uint8Array.of(...packed, 0))).toThrow(/^bytes: /);
    expect(() => unpackDrift(Uint8Array.of(9, ...packed.slice(1)))).toThrow(/^bytes: version 9/);
    expect(() => unpackDrift(Uint8Array.of(1, 0, 0, 0, 255, 255, 255, 255, 0, 0, 0, 0))).toThrow(/^bytes: 12/);
  });

  it("keep the entries they had when they grow or shrink", () => {
    const state = settled(0, 0.5);
    const grown = resizeDrift(state, 3);
    expect([...grown.count]).toEqual([20, 20, 0]);
    expect(resizeDrift(grown, 2)).toEqual(state);
    expect([...resizeDrift(state, 1).cusum]).toEqual([0]);
  });
});
