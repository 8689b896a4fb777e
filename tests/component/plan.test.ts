import { describe, expect, it } from "vitest";
import BuildBudget from "../../src/components/build/BuildBudget.vue";
import BuildExport from "../../src/components/build/BuildExport.vue";
import BuildPlan from "../../src/components/build/BuildPlan.vue";
import { indexRanges } from "../../src/format/indexRanges.ts";
import { plan as planSchema } from "../../shared/schemas/plan.ts";
import type { Plan } from "../../shared/schemas/plan.ts";
import { mountAt } from "./support.ts";

const block = { blockId: "3", model: "rotor.thrust", point: "nominal", output: "thrust", input: "pitch" };
const plan: Plan = planSchema.parse({
  lane: "default",
  commit: "a".repeat(40),
  buildId: "12",
  budget: { unit: "evaluations", amount: 100 },
  spent: 8,
  limit: 20,
  everyBuilds: 12,
  everyBuildsReason: null,
  items: [
    {
      ...block,
      columns: [0, 1, 2, 7],
      reason: { code: "open-break", sentence: "Two entries are in open break 4." },
      cost: 8,
      assumed: true,
      lastCheck: null,
      references: [],
    },
  ],
  left: [{ ...block, columns: [3, 4], waited: 2 }],
  tooDear: [],
});

describe("the plan on the page", () => {
  const mountPlan = (wish: Partial<Plan> = {}) =>
    mountAt(BuildPlan, { plan: { ...plan, ...wish }, project: "tidewheel" }, "/projects/tidewheel/builds");

  it("tells what to check, why, and at what cost", async () => {
    const { wrapper } = await mountPlan();
    expect(wrapper.find("li").text().replace(/\s+/g, " ")).toBe(
      "rotor.thrust, thrust by pitch, columns 0 to 2, 7. Two entries are in open break 4. 8 evaluations, assumed",
    );
    expect(wrapper.find("li a").attributes("href")).toBe("/projects/tidewheel/builds/12/blocks/3");
    expect(wrapper.text()).toContain("check every column at least once in twelve builds.");
    expect(wrapper.text()).toContain("Two columns wait for a later build.");
  });

  it("says that a promise is longer than the project's limit, and why there is none", async () => {
    expect((await mountPlan({ everyBuilds: 40 })).wrapper.text()).toContain("After 20 builds an entry counts");
    const { wrapper } = await mountPlan({ everyBuilds: null, everyBuildsReason: "One column costs too much." });
    expect(wrapper.find("p").text()).toBe("One column costs too much.");
  });

  it("shows no more lines than one reads", async () => {
    const items = Array.from({ length: 30 }, () => plan.items[0]!);
    const { wrapper } = await mountPlan({ items });
    expect(wrapper.findAll("li")).toHaveLength(9);
    expect(wrapper.findAll("li").at(-1)?.text()).toBe("and 22 lines more in the plan");
  });
});

it("asks for the budget by amount and unit, and takes no nonsense", async () => {
  const { wrapper } = await mountAt(BuildBudget, { budget: plan.budget });
  await wrapper.find("input").setValue("0");
  await wrapper.find("input").setValue("30");
  await wrapper.find("select").setValue("seconds");
  expect(wrapper.emitted("spend")).toEqual([[{ unit: "evaluations", amount: 30 }], [{ unit: "seconds", amount: 100 }]]);
});

it("links the export of a lane, or of all", async () => {
  const links = async (lane: string | null) =>
    (await mountAt(BuildExport, { project: "tidewheel", lane })).wrapper.findAll("a").map((a) => a.attributes("href"));
  expect(await links("gcc release")).toEqual([
    "/api/v1/projects/tidewheel/export?format=csv&lane=gcc+release",
    "/api/v1/projects/tidewheel/export?format=json&lane=gcc+release",
  ]);
  expect((await links(null))[0]).toBe("/api/v1/projects/tidewheel/export?format=csv");
});

it.each([
  [[], ""],
  [[4], "4"],
  [[0, 1], "0, 1"],
  [[0, 1, 2, 5, 6, 8, 9, 10, 11], "0 to 2, 5, 6, 8 to 11"],
])("lists %o as %s", (indices, text) => {
  expect(indexRanges(indices)).toBe(text);
});
