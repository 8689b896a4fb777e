import { describe, expect, it } from "vitest";
import type { Strip, StripColumn } from "../../shared/schemas/commit.ts";
import { apartMarks } from "../../src/drawing/drawStrip.ts";
import { cursorAfterKey, cursorIndex, findCommit, layoutStrip, placeBrackets } from "../../src/drawing/stripLayout.ts";
import {
  columnAt,
  columnsInView,
  columnX,
  contentWidth,
  openingPitch,
  placeY,
  scrollToShow,
  stripGeometry,
} from "../../src/drawing/stripGeometry.ts";
import { shaOf, stripFixture } from "./fixtures/history.ts";

const column = (index: number, rest: Partial<StripColumn> = {}): StripColumn => ({
  ...stripFixture(30).columns[0]!,
  commit: shaOf(index),
  parents: index === 0 ? [] : [shaOf(index - 1)],
  buildId: `b${index}`,
  state: "complete",
  worstError: 1e-8,
  verdict: "agrees",
  mainline: true,
  ...rest,
});
const unposted = { buildId: null, state: null, worstError: null, verdict: null, counts: null } as const;
const strip = (columns: StripColumn[], brackets: Strip["brackets"] = []): Strip => ({
  lane: "default",
  rtol: 1e-6,
  columns,
  brackets,
});

describe("layout of the strip", () => {
  it("puts one mark per judged commit at its error, and a gap where nothing was posted", () => {
    const layout = layoutStrip(
      strip([column(0), column(1, unposted), column(2, { worstError: 1e-2, verdict: "disagrees" })]),
    );
    expect(layout.marks.map((mark) => [mark.index, mark.place, mark.verdict])).toEqual([
      [0, 0.5, "agrees"],
      [2, 0.875, "disagrees"],
    ]);
    expect(layout.gaps).toEqual([1]);
  });
  it("stands an invalid commit at the head and one without references at the foot", () => {
    const layout = layoutStrip(
      strip([
        column(0, { worstError: null, verdict: "invalid" }),
        column(1, { worstError: null, verdict: "unreferenced" }),
      ]),
    );
    expect(layout.marks.map((mark) => mark.place)).toEqual([1, 0]);
  });
  it("does not judge a build whose shards are still coming", () => {
    expect(layoutStrip(strip([column(0, { state: "receiving" })])).gaps).toEqual([0]);
  });
  it("draws a branch as links from its fork, past an unposted commit, to the merge", () => {
    const layout = layoutStrip(
      strip([
        column(0),
        column(1, { mainline: false, parents: [shaOf(0)], ...unposted }),
        column(2, { mainline: false, parents: [shaOf(1)] }),
        column(3, { parents: [shaOf(0)] }),
        column(4, { parents: [shaOf(3), shaOf(2)] }),
      ]),
    );
    expect(layout.trace.map((mark) => mark.index)).toEqual([0, 3, 4]);
    expect(layout.links.map(({ from, to }) => [from.index, to.index])).toEqual([
      [0, 2],
      [2, 4],
    ]);
  });
  it("spans a bracket over suspects and onset, and leaves one out whose commits are elsewhere", () => {
    const columns = Array.from({ length: 40 }, (_, k) => column(k));
    const brackets = [
      { breakId: "c", onset: shaOf(30), suspects: [shaOf(30)] },
      { breakId: "a", onset: shaOf(12), suspects: [shaOf(11), shaOf(10)] },
      { breakId: "elsewhere", onset: "f".repeat(40), suspects: ["f".repeat(40)] },
    ];
    expect(layoutStrip(strip(columns, brackets)).brackets).toEqual([
      { breakId: "a", first: 10, last: 12, suspects: 2 },
      { breakId: "c", first: 30, last: 30, suspects: 1 },
    ]);
  });
  it("puts brackets that would overlap, words included, on different levels at every zoom", () => {
    const bracket = (first: number, last: number, suspects: number) => ({ breakId: "x", first, last, suspects });
    const levels = (brackets: ReturnType<typeof bracket>[], pitch: number) =>
      placeBrackets(brackets, pitch).map((placed) => placed.level);
    const near = [bracket(10, 12, 3), bracket(13, 13, 1), bracket(20, 24, 5)];
    expect(levels(near, 16)).toEqual([0, 0, 0]);
    expect(levels(near, 8)).toEqual([0, 0, 1]);
    expect(levels([bracket(5, 9, 5), bracket(6, 6, 1), bracket(7, 7, 1)], 16)).toEqual([0, 1, 1]);
    expect(
      levels(
        Array.from({ length: 6 }, () => bracket(5, 9, 5)),
        16,
      ),
    ).toEqual([0, 1, 2, 2, 2, 2]);
  });
  it("writes the words into a bracket that is wide enough, and none for a single suspect", () => {
    const placed = placeBrackets(
      [
        { breakId: "a", first: 9, last: 9, suspects: 1 },
        { breakId: "b", first: 10, last: 20, suspects: 11 },
        { breakId: "c", first: 40, last: 41, suspects: 2 },
      ],
      16,
    );
    expect(placed.map(({ words, level }) => [words, level])).toEqual([
      ["none", 0],
      ["inside", 0],
      ["before", 0],
    ]);
  });
  it("lays out 5,000 commits with as many marks and gaps together", () => {
    const layout = layoutStrip(stripFixture(5000));
    expect(layout.marks.length + layout.gaps.length).toBe(5000);
  });
});

describe("the cursor", () => {
  const columns = [column(0), column(1), column(2, { mainline: false }), column(3, unposted)];
  it("stands where the address says, else on the newest judged commit of the default branch", () => {
    expect(cursorIndex(columns, shaOf(0))).toBe(0);
    expect(cursorIndex(columns, null)).toBe(1);
    expect(cursorIndex(columns, "0".repeat(40))).toBe(1);
    expect(cursorIndex([], null)).toBe(null);
  });
  it("moves by keys and stays on the strip", () => {
    expect(cursorAfterKey("ArrowLeft", 0, 100, 10)).toBe(0);
    expect(cursorAfterKey("ArrowRight", 5, 100, 10)).toBe(6);
    expect(cursorAfterKey("PageDown", 95, 100, 10)).toBe(99);
    expect(cursorAfterKey("Home", 50, 100, 10)).toBe(0);
    expect(cursorAfterKey("End", 50, 100, 10)).toBe(99);
    expect(cursorAfterKey("a", 50, 100, 10)).toBe(null);
  });
  it("finds a commit by four digits or more, and only if it is one commit", () => {
    expect(findCommit(columns, shaOf(2).slice(0, 8).toUpperCase())).toBe(2);
    expect(findCommit(columns, shaOf(2).slice(0, 3))).toBe(null);
    expect(findCommit([column(0), column(0)], shaOf(0))).toBe(null);
    expect(findCommit(columns, "zzzz")).toBe(null);
  });
});

describe("pixels of the strip", () => {
  const g = stripGeometry(1440, 188, 12, 240);
  it("finds the column under a pixel again", () => {
    for (const index of [20, 37, 90]) expect(columnAt(g, columnX(g, index), 108)).toBe(index);
    expect(columnAt(g, 0, 5)).toBe(4);
  });
  it("stands the ruler between top and foot", () => {
    expect(placeY(g, 0)).toBe(g.foot);
    expect(placeY(g, 1)).toBe(g.top);
  });
  it("fills the width with few commits and scrolls with many", () => {
    expect(contentWidth(stripGeometry(1440, 188, openingPitch(1440, 100), 0), 100)).toBeCloseTo(1440, 6);
    expect(contentWidth(stripGeometry(1440, 188, openingPitch(1440, 5000), 0), 5000)).toBeGreaterThan(1440);
  });
  it("draws only the columns in view", () => {
    const { first, last } = columnsInView(g, 5000);
    expect(first).toBe(19);
    expect(last - first).toBeLessThan(130);
  });
  it("scrolls no more than needed", () => {
    expect(scrollToShow(g, 60)).toBe(240);
    expect(scrollToShow(g, 0)).toBe(0);
    expect(columnX({ ...g, scroll: scrollToShow(g, 400) }, 400)).toBeLessThan(g.right);
  });
  it("leaves out only marks that would be drawn over another of their kind", () => {
    const marks = layoutStrip(stripFixture(5000)).marks;
    const dense = { ...g, pitch: 0.27 };
    const kept = apartMarks(marks, "disagrees", dense);
    expect(kept.length).toBeLessThan(marks.length / 4);
    for (const mark of marks.filter((m) => m.verdict === "disagrees")) {
      const near = kept.some(
        (k) =>
          Math.abs(k.index - mark.index) * 0.27 < 3 && Math.abs(placeY(dense, k.place) - placeY(dense, mark.place)) < 4,
      );
      expect(near).toBe(true);
    }
    expect(apartMarks(marks, "agrees", g)).toHaveLength(marks.filter((m) => m.verdict === "agrees").length);
  });
});
