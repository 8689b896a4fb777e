import { flushPromises } from "@vue/test-utils";
import { describe, expect, it, vi } from "vitest";
import BlockEntry from "../../src/components/block/BlockEntry.vue";
import BlockMap from "../../src/components/block/BlockMap.vue";
import BlockReferences from "../../src/components/block/BlockReferences.vue";
import BlockTable from "../../src/components/block/BlockTable.vue";
import { decodePlanes } from "../../src/drawing/planes.ts";
import BlockDetailView from "../../src/views/BlockDetailView.vue";
import { blockFixture } from "./fixtures/blocks.ts";
import { stripFixture } from "./fixtures/history.ts";
import { answerByPath, mountAt } from "./support.ts";

const block = blockFixture(stripFixture());
const planes = decodePlanes(block);

describe("the matrix map", () => {
  it("moves the crosshair by keys and holds the edge", async () => {
    const { wrapper } = await mountAt(BlockMap, { planes, layer: "error", at: { row: 0, column: 59 }, label: "map" });
    for (const key of ["ArrowDown", "ArrowRight", "Home", "PageUp"]) await wrapper.trigger("keydown", { key });
    expect(wrapper.emitted("point")).toEqual([
      [{ row: 1, column: 59 }],
      [{ row: 0, column: 59 }],
      [{ row: 0, column: 0 }],
      [{ row: 0, column: 59 }],
    ]);
  });
});

describe("the table of entries", () => {
  const props = { block, planes, at: { row: 45, column: 3 }, order: "worst first" };
  it("draws a screenful of 3,600 rows and knows how many there are", async () => {
    const { wrapper } = await mountAt(BlockTable, props);
    expect(wrapper.find("[role=grid]").attributes("aria-rowcount")).toBe("3600");
    expect(wrapper.findAll("[role=row]").length).toBeLessThan(40);
  });
  it("marks the entry under the crosshair and moves it by keys, in its own order", async () => {
    const { wrapper } = await mountAt(BlockTable, props);
    expect(wrapper.find("[aria-selected=true]").text()).toContain("deficit[45] by spacing[3]");
    await wrapper.find("[role=grid]").trigger("keydown", { key: "ArrowDown" });
    expect(wrapper.emitted("point")).toEqual([[{ row: 45, column: 4 }]]);
  });
});

describe("the entry under the crosshair", () => {
  it("tells value, reference, verdict, motion and which reference judged it", async () => {
    const { wrapper } = await mountAt(BlockEntry, { block, planes, at: { row: 45, column: 3 } });
    const text = wrapper.text();
    for (const word of ["unresolved", "derivative alone", "central difference", "deficit[45]"])
      expect(text).toContain(word);
    expect(wrapper.find("[data-full]").attributes("data-full")).toBe(String(planes.derivative[45 * 60 + 3]));
  });
  it("says none where there is no reference", async () => {
    const bare = {
      ...planes,
      reference: new Float64Array(3600).fill(Number.NaN),
      source: new Uint8Array(3600).fill(255),
    };
    const { wrapper } = await mountAt(BlockEntry, { block, planes: bare, at: { row: 0, column: 0 } });
    expect(wrapper.text()).toContain("no reference");
  });
});

it("references stand side by side with their share of the judging", async () => {
  const { wrapper } = await mountAt(BlockReferences, { block, planes });
  expect(wrapper.text().replaceAll("\u00a0", " ")).toContain("5 from 1 × 10⁻³ to 1 × 10⁻⁷ relative");
  expect(wrapper.text()).toContain("100 % of the entries");
  expect(wrapper.text()).toContain("4 of 60");
});

it("the page puts the strip on the block's commit and the crosshair into the address", async () => {
  answerByPath({ "/projects/tidewheel/builds/b1/blocks/wake-deficit": block });
  const { wrapper, router } = await mountAt(BlockDetailView, {}, "/projects/tidewheel/builds/b1/blocks/wake-deficit");
  await vi.waitFor(() => expect(wrapper.find("h1").exists()).toBe(true));
  expect(wrapper.find("h1").text()).toBe("wake.deficit has 41 entries that the references cannot decide.");
  await flushPromises();
  expect(router.currentRoute.value.query).toMatchObject({ lane: block.lane, at: block.commit });
  await wrapper.find("[role=application]").trigger("keydown", { key: "ArrowDown" });
  expect(wrapper.text()).toContain("Row 1 (deficit[1]), column 1 (spacing[1])");
  await vi.waitFor(() => expect(router.currentRoute.value.query.entry).toBe("1,1"));
  expect(router.currentRoute.value.query.at).toBe(block.commit);
});
