import { describe, expect, it } from "vitest";
import type { BlockRow } from "../../shared/schemas/block.ts";
import BlockProbes from "../../src/components/block/BlockProbes.vue";
import BlockSubject from "../../src/components/block/BlockSubject.vue";
import BuildBlocks from "../../src/components/build/BuildBlocks.vue";
import VerdictCounts from "../../src/components/common/VerdictCounts.vue";
import { blockSentence, buildSentence } from "../../src/format/blockSentence.ts";
import { breakMarkdown, entryName } from "../../src/format/breakMarkdown.ts";
import { columnText } from "../../src/format/columnText.ts";
import { groupBlocks, probesLoudestFirst } from "../../src/format/probes.ts";
import { verdictCounts } from "../../src/format/words.ts";
import { blockFixture, blockRowsFixture } from "./fixtures/blocks.ts";
import { stripFixture } from "./fixtures/history.ts";
import { breakFixture, buildFixture, countsFixture } from "./fixtures/record.ts";
import { mountAt } from "./support.ts";

const strip = stripFixture();
const HERE = "/projects/tidewheel/builds/b1/blocks/wake-deficit";
const block = blockFixture(strip);
const probes = (bad: Partial<ReturnType<typeof countsFixture>["probes"]>) => ({
  agrees: 0,
  disagrees: 0,
  unresolved: 0,
  invalid: 0,
  ...bad,
});

const [head, other] = blockRowsFixture() as [BlockRow, BlockRow];
const one = { blocks: 1, entries: 1, agrees: 0, disagrees: 0, unresolved: 0, unreferenced: 0, invalid: 0 };
const probeOf = (row: BlockRow, probe: string, verdict: "agrees" | "disagrees" | "unresolved"): BlockRow => ({
  ...row,
  blockId: `${row.blockId} ${probe}`,
  probe,
  rows: 1,
  columns: 1,
  counts: { ...one, [verdict]: 1 },
  worst: row.worst && { ...row.worst, verdict, error: verdict === "agrees" ? 1e-16 : 0.25 },
});

describe("the probes of a block", () => {
  it("stand worst first, each with its verdict, its error on the ruler and its sentence", async () => {
    const { wrapper } = await mountAt(BlockProbes, { block }, HERE);
    const items = wrapper.findAll("li").map((item) => item.text().replaceAll("\u00a0", " "));
    expect(items).toHaveLength(2);
    expect(items[0]).toContain("Taylor remainder, seed 7");
    expect(items[0]).toContain("disagrees");
    expect(items[0]).toContain("The directional derivative is off by 0.0045 of its size");
    expect(items[0]).toContain("Slope 1.28. 3 of 3 steps stand above rounding. The size of the function is assumed.");
    expect(items[1]).toContain("dot product, seed 7");
    expect(items[1]).not.toContain("Slope");
    expect(wrapper.findAll("svg[role=img]").map((ruler) => ruler.attributes("aria-label"))[1]).toContain("agrees");
    expect(wrapper.findAll("a").map((link) => link.attributes("href"))[0]).toContain("/blocks/wake-deficit-taylor");
  });

  it("show no ruler where a slope decided, and no link to the page that is open", async () => {
    const told = { ...block.probes[1]!, tolerance: null };
    const { wrapper } = await mountAt(BlockProbes, { block: { ...block, blockId: told.blockId, probes: [told] } });
    expect(wrapper.find("svg[role=img]").exists()).toBe(false);
    expect(wrapper.find("a").exists()).toBe(false);
  });

  it("are listed as far as a screen goes, and then on demand", async () => {
    const many = Array.from({ length: 30 }, (_, at) => ({ ...block.probes[0]!, blockId: `p${at}`, label: String(at) }));
    const { wrapper } = await mountAt(BlockProbes, { block: { ...block, probes: many } }, HERE);
    expect(wrapper.findAll("li")).toHaveLength(8);
    await wrapper.find("button").trigger("click");
    expect(wrapper.findAll("li")).toHaveLength(30);
  });

  it("are told nothing of where there are none", async () => {
    const { wrapper } = await mountAt(BlockProbes, { block: { ...block, probes: [] } });
    expect(wrapper.find("section").exists()).toBe(false);
  });

  it("come what is no number first, then the largest error", () => {
    const [good, bad] = block.probes;
    const list = [
      good!,
      { ...bad!, error: 0.1 },
      { ...bad!, error: null },
      { ...good!, verdict: "unresolved" as const },
    ];
    expect(probesLoudestFirst(list).map(({ verdict, error }) => [verdict, error])).toEqual([
      ["disagrees", null],
      ["disagrees", 0.1],
      ["unresolved", good!.error],
      ["agrees", good!.error],
    ]);
  });
});

it("the page of a probe says what it probes, with a way there", async () => {
  const probe = { ...block, probe: "taylor: seed 7", probeOf: "wake-deficit" };
  const { wrapper } = await mountAt(BlockSubject, { block: probe }, HERE);
  expect(wrapper.text()).toBe("A probe of deficit by spacing at point nominal");
  expect(wrapper.find("a").attributes("href")).toContain("/blocks/wake-deficit");
  const alone = await mountAt(BlockSubject, { block: { ...probe, probeOf: null } }, HERE);
  expect(alone.wrapper.text()).toBe("A probe of deficit by spacing, which is probed only, at point nominal");
});

describe("the blocks of a build", () => {
  const rows = [
    probeOf(other, "dot-product: 1", "disagrees"),
    head,
    probeOf(head, "taylor: 1", "agrees"),
    other,
    probeOf(head, "taylor: 2", "unresolved"),
  ];

  it("have their probes under them, loudest first", () => {
    expect(groupBlocks(rows).map(({ named, probes: under }) => [named.model, under.map(({ probe }) => probe)])).toEqual(
      [
        [other.model, ["dot-product: 1"]],
        [head.model, ["taylor: 2", "taylor: 1"]],
      ],
    );
  });

  it("come by the loudest of block and probes", async () => {
    const build = buildFixture(strip);
    const good = { ...other, counts: countsFixture(4), signatures: [] };
    const quiet = { ...head, counts: countsFixture(4), signatures: [] };
    const listed = [quiet, good, probeOf(good, "dot-product: 1", "disagrees")];
    const { wrapper } = await mountAt(BuildBlocks, { rows: listed, project: "tidewheel", build });
    const texts = wrapper.findAll("tbody tr").map((row) => row.find("th").text());
    expect(texts[0]).toContain(good.model);
    expect(texts[1]).toBe("probe dot-product: 1");
    expect(texts[2]).toContain(quiet.model);
    expect(wrapper.findAll("tbody tr")[1]!.text()).toContain("1 disagrees");
  });

  it("are named where they were probed only, and many probes are counted", async () => {
    const build = buildFixture(strip);
    const many = Array.from({ length: 7 }, (_, at) => probeOf(head, `dot-product: ${at}`, "agrees"));
    const { wrapper } = await mountAt(BuildBlocks, { rows: many, project: "tidewheel", build });
    expect(wrapper.find("tbody th").text()).toContain("probed only");
    expect(wrapper.findAll("tbody tr")).toHaveLength(7);
    expect(wrapper.text()).toContain("and 2 more probes, listed on the page of the block");
  });
});

describe("words", () => {
  it("count probes beside entries", async () => {
    const all = countsFixture(6);
    expect(verdictCounts({ ...all, probes: probes({ agrees: 3 }) }).map(({ text }) => text)).toEqual(["all agree"]);
    expect(verdictCounts({ ...all, probes: probes({ disagrees: 1, invalid: 2 }) }).map(({ text }) => text)).toEqual([
      "2 probes invalid",
      "1 probe disagrees",
      "all agree",
    ]);
    const none = { ...countsFixture(0), probes: probes({ agrees: 2 }) };
    expect(verdictCounts(none).map(({ text }) => text)).toEqual(["2 probes agree"]);
    const { wrapper } = await mountAt(VerdictCounts, {
      counts: { ...countsFixture(6, { disagrees: 1 }), probes: probes({ disagrees: 1, agrees: 2 }) },
    });
    expect(wrapper.text()).toMatch(/1 disagrees.*1 probe disagrees.*5 agree.*6 entries in 2 blocks, 3 probes/);
  });

  it("say what a build came to with its probes", () => {
    const sentence = (counts: ReturnType<typeof countsFixture>) =>
      buildSentence({ ...buildFixture(strip), state: "complete", summary: counts });
    const all = countsFixture(6);
    expect(sentence({ ...all, probes: probes({ agrees: 2 }) })).toBe("The build agrees in every entry.");
    expect(sentence({ ...all, probes: probes({ agrees: 2, disagrees: 1 }) })).toBe(
      "The build agrees in every entry; one probe of 3 disagrees.",
    );
    const only = (bad: Parameters<typeof probes>[0]) => sentence({ ...countsFixture(0), probes: probes(bad) });
    expect(only({ agrees: 1 })).toBe("The build has no entries; its one probe agrees.");
    expect(only({ agrees: 2 })).toBe("The build has no entries; all of its 2 probes agree.");
    expect(only({ agrees: 2, unresolved: 1 })).toBe("The build has no entries; one probe of 3 cannot tell.");
  });

  it("say what a probe came to", () => {
    const sentence = (verdict: "agrees" | "disagrees" | "unresolved") =>
      blockSentence(probeOf(head, "taylor: 1", verdict));
    expect(sentence("agrees")).toBe(`Probe taylor: 1 of ${head.model} agrees.`);
    expect(sentence("disagrees")).toBe(`Probe taylor: 1 of ${head.model} disagrees.`);
    expect(sentence("unresolved")).toBe(`Probe taylor: 1 of ${head.model} cannot tell at this tolerance.`);
  });

  it("name a probe wherever an entry is named", () => {
    const record = breakFixture(strip);
    const entry = { ...record.entries[0]!, probe: "dot-product: seed 7" };
    expect(entryName(entry)).toBe("probe dot-product: seed 7 of T1 by pitch");
    expect(entryName({ ...entry, probe: "directional: x", row: 2 })).toBe("probe directional: x of T1[2] by pitch");
    expect(breakMarkdown({ ...record, entries: [entry] }, "x")).toContain(
      "| probe dot-product: seed 7 of T1 by pitch |",
    );
    const column = strip.columns.findLast(({ counts }) => counts !== null)!;
    const worst = { ...column.worst!, probe: "taylor: 1" };
    expect(columnText({ ...column, verdict: "disagrees", worst })).toContain(
      "probe taylor: 1 of rotor.thrust disagrees, ",
    );
  });
});
