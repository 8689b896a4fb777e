import { describe, expect, it } from "vitest";
import { CAUTION } from "../../shared/domain/vocabulary.ts";
import BreakEntries from "../../src/components/break/BreakEntries.vue";
import BreakSuspects from "../../src/components/break/BreakSuspects.vue";
import EntryTrace from "../../src/components/entry/EntryTrace.vue";
import { resolutionOf, traceEntry, valueScale } from "../../src/drawing/entryTrace.ts";
import { breakMarkdown, entryName, worstFirst } from "../../src/format/breakMarkdown.ts";
import { blockSentence, buildSentence } from "../../src/format/blockSentence.ts";
import { historyFixture } from "./fixtures/blocks.ts";
import { stripFixture } from "./fixtures/history.ts";
import { breakFixture, buildFixture, countsFixture } from "./fixtures/record.ts";
import { answerWith, mountAt } from "./support.ts";

const strip = stripFixture();
const record = breakFixture(strip);

describe("a break as Markdown", () => {
  const here = { ...record, sentence: "Three partials of rotor.thrust stopped agreeing here." };
  const text = breakMarkdown(here, "https://clinograph.example/projects/tidewheel/breaks/31").replaceAll("\u00a0", " ");
  it("says what, who moved, which commit, the next test and the caution", () => {
    expect(text).toContain("### Three partials of rotor.thrust stopped agreeing.");
    expect(text).toContain("The derivative moved alone.");
    expect(text).toContain("degrees where radians are meant");
    expect(text).toContain("| rotor.thrust | T1[0] by pitch[1] | -12.403812345678 | -710.6860123456 | 9.8 × 10⁻¹ |");
    for (const suspect of record.suspects) expect(text).toContain(`\`${suspect.commit.slice(0, 7)}\``);
    expect(text).toContain("leaves at most 2.");
    expect(text).toContain(CAUTION);
  });
  it("calls entries by the names of their elements where they have some", () => {
    const side = (name: string, elements: string[] | null) => ({ name, size: 3, unit: null, elements });
    const names = new Map([
      ["rotor-thrust", { output: side("thrust", ["neap", "mid", "spring"]), input: side("blade", null) }],
    ]);
    expect(entryName(record.entries[2]!, names)).toBe("spring by blade[1]");
    expect(entryName({ ...record.entries[2]!, blockId: "other" }, names)).toBe("T3[2] by pitch[1]");
  });
  it("keeps a table whole when a name has a bar in it, and counts what it leaves out", () => {
    const entries = Array.from({ length: 12 }, (_, row) => ({ ...record.entries[0]!, row, output: "a|b" }));
    const long = breakMarkdown({ ...record, entries, entryCount: 40 }, "x");
    expect(long).toContain("a\\|b[0]");
    expect(long).toContain("and 30 more entries.");
  });
  it("puts the worst first, and what is no number before it", () => {
    const [a, b] = record.entries;
    const order = worstFirst([
      { ...a!, error: 1e-3 },
      { ...b!, error: 0.5 },
      { ...a!, error: null, verdict: "invalid" },
    ]);
    expect(order.map((entry) => entry.error)).toEqual([null, 0.5, 1e-3]);
  });
});

describe("the trace of an entry", () => {
  it("gives back what the reference can see, from the divisor that the error was made with", () => {
    const seen = (derivative: number, reference: number, uncertainty: number, error: number) =>
      resolutionOf({ derivative, reference, uncertainty, error });
    expect(seen(2, 1, 1e-6, 1)).toBeCloseTo(1e-6, 12);
    expect(seen(1e-3, 0, 1e-6, 1)).toBeCloseTo(1e-3, 12);
    expect(seen(5, 5, 1e-6, 0)).toBeCloseTo(2e-7, 12);
    expect(seen(0, 0, 1e-6, 0)).toBe(null);
    expect(seen(1, 1, 0, 0)).toBe(0);
    expect(resolutionOf({ derivative: 1, reference: null, uncertainty: null, error: null })).toBe(null);
  });
  it("runs from the oldest to the newest and stands errors on the ruler", () => {
    const points = traceEntry(historyFixture(strip));
    expect(points[0]!.along).toBe(0);
    expect(points.at(-1)!.along).toBe(1);
    expect(points.at(-1)!.place).toBeGreaterThan(0.99);
    expect(traceEntry([{ ...historyFixture(strip)[0]!, error: null, verdict: "invalid" }])[0]!.place).toBe(1);
  });
  it("scales values that move, that stand, and that are not there", () => {
    expect(valueScale([-10, 10]).place(0)).toBeCloseTo(0.5, 12);
    expect(valueScale([3, 3]).place(3)).toBeCloseTo(0.5, 12);
    expect(valueScale([Number.NaN]).place(1)).toBe(0.5);
  });
  it("is drawn with the onset marked and every judged build on it", async () => {
    const history = historyFixture(strip);
    const { wrapper } = await mountAt(EntryTrace, { history, tolerance: 1e-6, onset: record.onset.commit, at: null });
    expect(wrapper.findAll("g")).toHaveLength(history.length);
    expect(wrapper.attributes("aria-label")).toContain(record.onset.commit.slice(0, 7));
  });
});

describe("the break's parts", () => {
  it("list entries with their values before and let one be chosen", async () => {
    const { wrapper } = await mountAt(BreakEntries, {
      entries: record.entries,
      total: 9,
      chosen: record.entries[0],
      tolerance: 1e-6,
    });
    expect(wrapper.findAll("tbody tr")).toHaveLength(3);
    expect(wrapper.text()).toContain("−710.6860");
    expect(wrapper.text()).toContain("The worst 3 of 9 entries are listed.");
    await wrapper.findAll("tbody button")[1]!.trigger("click");
    expect(wrapper.emitted("choose")).toEqual([[1]]);
  });
  it("ask for the next test", async () => {
    const sent = answerWith({ body: { items: [] } }, { status: 201 }, { body: { items: [] } });
    const { wrapper } = await mountAt(BreakSuspects, { record }, "/projects/tidewheel/breaks/31");
    expect(wrapper.findAll("ol > li")).toHaveLength(4);
    const button = wrapper.findAll("button").find((b) => b.text().startsWith("Ask for the next test"));
    await button!.trigger("click");
    const post = sent.find((request) => request.method === "POST");
    expect(post?.path).toBe("/api/v1/projects/tidewheel/wanted");
    expect(post?.body).toEqual({ commit: record.nextTest!.commit, lane: "gcc-release" });
  });
});

describe("sentences", () => {
  it("say what a block came to", () => {
    const of = (entries: number, bad = {}) =>
      blockSentence({ model: "rotor.thrust", probe: null, counts: countsFixture(entries, bad) });
    expect(of(18, { disagrees: 3 })).toBe("rotor.thrust disagrees in three entries of 18.");
    expect(of(18)).toBe("rotor.thrust agrees in every entry.");
    expect(of(18, { invalid: 1, disagrees: 2 })).toBe("rotor.thrust has one entry that is not a finite number.");
    expect(of(18, { unresolved: 2 })).toBe("rotor.thrust has two entries that the references cannot decide.");
    expect(of(4, { unreferenced: 4 })).toBe("rotor.thrust has no reference to judge it by.");
  });
  it("say that shards are missing", () => {
    expect(buildSentence({ ...buildFixture(strip), state: "receiving" })).toBe("One shard of 4 is still to come.");
  });
});
