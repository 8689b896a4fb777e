import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import StripChart from "../../src/components/strip/StripChart.vue";
import { stripFixture } from "./fixtures/history.ts";
import { mountAt } from "./support.ts";

describe("the strip", () => {
  beforeEach(() => vi.useFakeTimers());
  afterEach(() => vi.useRealTimers());
  const strip = stripFixture(60);

  async function drawn(at = 30) {
    const { wrapper } = await mountAt(StripChart, { strip, at });
    return { wrapper, slider: wrapper.find("[role=slider]") };
  }

  it("is a slider that says the commit and what was found", async () => {
    const { slider } = await drawn();
    expect(slider.attributes("aria-valuenow")).toBe("31");
    expect(slider.attributes("aria-valuetext")).toContain(strip.columns[30]!.commit.slice(0, 7));
    expect(slider.attributes("aria-valuetext")).toContain(strip.columns[30]!.subject);
  });
  it("moves at once by keys and tells its page once, when the keys rest", async () => {
    const { wrapper, slider } = await drawn();
    await slider.trigger("keydown", { key: "ArrowLeft" });
    await slider.trigger("keydown", { key: "ArrowLeft" });
    expect(slider.attributes("aria-valuenow")).toBe("29");
    expect(wrapper.emitted("move")).toBeUndefined();
    vi.advanceTimersByTime(300);
    expect(wrapper.emitted("move")).toEqual([[28]]);
  });
  it("goes to a typed sha", async () => {
    const { wrapper, slider } = await drawn();
    for (const key of strip.columns[7]!.commit.slice(0, 7)) await slider.trigger("keydown", { key });
    vi.advanceTimersByTime(10);
    expect(wrapper.emitted("move")).toEqual([[7]]);
  });
  it("has a table behind it, around the cursor", async () => {
    const { wrapper } = await drawn(0);
    const rows = wrapper.findAll("tbody tr");
    expect(rows).toHaveLength(41);
    expect(rows[0]!.attributes("aria-current")).toBe("true");
    expect(wrapper.find("caption").text()).toContain("of 60 in lane");
  });
  it("leaves keys with a modifier to the browser", async () => {
    const { wrapper, slider } = await drawn();
    await slider.trigger("keydown", { key: "ArrowLeft", altKey: true });
    vi.advanceTimersByTime(300);
    expect(wrapper.emitted("move")).toBeUndefined();
  });
});
