import { mount } from "@vue/test-utils";
import { describe, expect, it } from "vitest";
import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import VerdictText from "../../src/components/common/VerdictText.vue";
import { MARKS } from "../../src/drawing/marks.ts";
import { verdictCounts } from "../../src/format/words.ts";
import { countsFixture } from "./fixtures/record.ts";

describe("marks", () => {
  it("tell every verdict apart by shape alone", () => {
    const shapes = VERDICTS.map((verdict) => `${MARKS[verdict].path}/${MARKS[verdict].filled}`);
    expect(new Set(shapes).size).toBe(VERDICTS.length);
  });
  it.each(VERDICTS)("say %s by shape, word and colour together", (verdict) => {
    const wrapper = mount(VerdictText, { props: { verdict } });
    expect(wrapper.text()).toBe(verdict);
    expect(wrapper.find("path").attributes("d")).toBe(MARKS[verdict].path);
    expect(wrapper.attributes("style")).toContain(`--${verdict}`);
    expect(wrapper.attributes("title")).not.toBe("");
  });
});

describe("verdict counts", () => {
  it("tell the loudest first and keep the singular", () => {
    expect(verdictCounts(countsFixture(20, { disagrees: 1, invalid: 2, unresolved: 3 }))).toEqual([
      { verdict: "invalid", text: "2 invalid" },
      { verdict: "disagrees", text: "1 disagrees" },
      { verdict: "unresolved", text: "3 unresolved" },
      { verdict: "agrees", text: "14 agree" },
    ]);
  });
  it("say all agree only where all do", () => {
    expect(verdictCounts(countsFixture(18))).toEqual([{ verdict: "agrees", text: "all agree" }]);
    expect(verdictCounts(countsFixture(0))).toEqual([]);
  });
});
