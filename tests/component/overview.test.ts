import { describe, expect, it } from "vitest";
import OverviewModels from "../../src/components/overview/OverviewModels.vue";
import OverviewNews from "../../src/components/overview/OverviewNews.vue";
import ResolutionCurve from "../../src/components/overview/ResolutionCurve.vue";
import StateProblem from "../../src/components/common/StateProblem.vue";
import { ApiProblem } from "../../src/api/problem.ts";
import { copyFullNumbers } from "../../src/composables/copyFullNumbers.ts";
import { stripFixture } from "./fixtures/history.ts";
import { overviewFixture } from "./fixtures/record.ts";
import { mountAt } from "./support.ts";

const overview = overviewFixture(stripFixture());

describe("the overview", () => {
  it("lists models as they come, and sorts by the address", async () => {
    const { wrapper, router } = await mountAt(
      OverviewModels,
      { overview, project: "tidewheel" },
      "/projects/tidewheel",
    );
    const first = () => wrapper.find("tbody th a").text();
    expect(first()).toBe("rotor.thrust");
    await wrapper.find("thead button").trigger("click");
    await new Promise((done) => setTimeout(done));
    expect(router.currentRoute.value.query.sort).toBe("model");
    expect(first()).toBe("blade.section");
    expect(wrapper.find("th[aria-sort=ascending]").exists()).toBe(true);
  });
  it("links a model to its worst entry", async () => {
    const { wrapper } = await mountAt(OverviewModels, { overview, project: "tidewheel" }, "/projects/tidewheel");
    expect(wrapper.find("tbody a").attributes("href")).toContain(
      `/builds/${overview.buildId}/blocks/rotor-thrust?entry=0,1`,
    );
  });
  it("tells breaks, climbs, vanished blocks and silence alike", async () => {
    const { wrapper } = await mountAt(OverviewNews, { overview, project: "tidewheel" }, "/projects/tidewheel");
    const lines = wrapper.findAll("li").map((line) => line.text());
    expect(lines).toHaveLength(4);
    expect(lines[0]).toContain("began here");
    expect(lines[2]).toContain("no longer posts deficit by yaw");
    expect(lines[3]).toContain("clang-debug is silent");
  });
  it("says so when there is nothing to tell", async () => {
    const quiet = { ...overview, openBreaks: [], newBreaks: [], climbs: [], vanishedBlocks: [], silentLanes: [] };
    const { wrapper } = await mountAt(OverviewNews, { overview: quiet, project: "tidewheel" }, "/projects/tidewheel");
    expect(wrapper.text()).toContain("No break is open");
  });
  it("reads the resolution at the tolerance off the curve", async () => {
    const curve = [
      { rtol: 1e-8, share: 0.2 },
      { rtol: 1e-6, share: 0.9 },
      { rtol: 1e-2, share: 1 },
    ];
    const { wrapper } = await mountAt(ResolutionCurve, {
      curve,
      rtol: 1e-6,
      resolution: { resolvedShare: 0.9, at: 1e-6, weakest: 1e-2 },
      entries: 200,
    });
    expect(wrapper.text()).toContain("90 % of 200 entries");
    expect(wrapper.text()).toContain("for 20 the references are too coarse or absent");
  });
});

describe("trouble", () => {
  it("shows detail, request and a way to try again", async () => {
    const error = new ApiProblem({
      status: 500,
      title: "Something went wrong",
      detail: "It was logged.",
      instance: "req-9",
    });
    const { wrapper } = await mountAt(StateProblem, { error });
    expect(wrapper.text()).toContain("It was logged.");
    expect(wrapper.text()).toContain("req-9");
    await wrapper.find("button").trigger("click");
    expect(wrapper.emitted("retry")).toHaveLength(1);
  });
  it("does not offer to try again what is forbidden, and says who can help", async () => {
    const { wrapper } = await mountAt(StateProblem, { error: new ApiProblem({ status: 403, title: "Not allowed" }) });
    expect(wrapper.find("button").exists()).toBe(false);
    expect(wrapper.text()).toContain("A lead of the project");
  });
});

describe("copying", () => {
  const copied = (select: (range: Range) => void) => {
    const range = document.createRange();
    select(range);
    document.getSelection()!.removeAllRanges();
    document.getSelection()!.addRange(range);
    const data = new Map<string, string>();
    const event = { clipboardData: { setData: (t: string, v: string) => data.set(t, v) }, preventDefault: () => {} };
    copyFullNumbers(event as unknown as ClipboardEvent);
    return data.get("text/plain");
  };
  it("gives full values for shortened numbers, cells apart by tabs", () => {
    document.body.innerHTML = `<table><tr><th>T1</th><td><span data-full="0.98254">9.8×10<sup>−1</sup></span></td></tr></table>`;
    expect(copied((range) => range.selectNodeContents(document.body))).toBe("T1\t0.98254");
    expect(copied((range) => range.selectNodeContents(document.querySelector("sup")!))).toBe("0.98254");
  });
  it("leaves text without numbers to the browser", () => {
    document.body.innerHTML = "<p>plain</p>";
    expect(copied((range) => range.selectNodeContents(document.body))).toBeUndefined();
  });
});
