import { mount } from "@vue/test-utils";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import NumberText from "../../src/components/common/NumberText.vue";
import { countText, countWords, numberParts, numberText, percentText } from "../../src/format/number.ts";

describe("a number as people read it", () => {
  it.each([
    [3.2e-7, "3.2 × 10⁻⁷"],
    [-1.75e-2, "−1.8 × 10⁻²"],
    [9.96e-5, "1.0 × 10⁻⁴"],
    [1, "1.0 × 10⁰"],
    [6.02e23, "6.0 × 10²³"],
    [5e-324, "4.9 × 10⁻³²⁴"],
    [0, "0"],
    [-0, "0"],
  ])("%f reads %s", (value, text) => {
    expect(numberText(value)).toBe(text.replaceAll(" ", "\u00a0"));
  });

  it("writes values within reach of the eye out when asked to", () => {
    expect(numberText(-710.6860123456, 7, true)).toBe("−710.6860");
    expect(numberText(0.1040648, 7, true)).toBe("0.1040648");
    expect(numberText(1.219025e-3, 7, true)).toBe("1.219025\u00a0×\u00a010⁻³");
    expect(numberText(123456, 3, true)).toBe("1.23\u00a0×\u00a010⁵");
    expect(numberText(99_999.9, 3, true)).toBe("1.00\u00a0×\u00a010⁵");
  });

  it("says in words what is not a finite number", () => {
    expect(numberText("NaN")).toBe("not a number");
    expect(numberText("-Infinity")).toBe("−infinite");
    expect(numberParts("Infinity").full).toBe("Infinity");
  });

  it("keeps the full binary64 value beside the short one", () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true }), (value) => {
        expect(Object.is(Number(numberParts(value).full), value)).toBe(true);
      }),
    );
  });

  it("is within half a unit of its last digit", () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-300, max: 1e300, noNaN: true }), (value) => {
        const { coefficient, exponent } = numberParts(value, 3);
        const shown = Number(`${coefficient}e${(exponent ?? "0").replace("\u2212", "-")}`);
        expect(Math.abs(shown - value)).toBeLessThanOrEqual(value * 0.005000001);
      }),
    );
  });

  it("is drawn with a real superscript and tells the full value", () => {
    const wrapper = mount(NumberText, { props: { value: 1.7123456789e-2 } });
    expect(wrapper.find("sup").text()).toBe("−2");
    expect(wrapper.attributes("data-full")).toBe("0.017123456789");
    expect(mount(NumberText, { props: { value: null } }).text()).toBe("none");
  });
});

describe("counts and shares", () => {
  it("groups thousands and says small counts in words", () => {
    expect(countText(1234567)).toBe("1\u202f234\u202f567");
    expect(countWords(1, "break")).toBe("one break");
    expect(countWords(3, "entry", "entries")).toBe("three entries");
    expect(countWords(40, "build")).toBe("40 builds");
  });
  it("never rounds a rest away", () => {
    expect(percentText(1)).toBe("100 %");
    expect(percentText(0.99999)).toBe("99.9 %");
    expect(percentText(0.00001)).toBe("0.1 %");
    expect(percentText(0)).toBe("0 %");
    expect(percentText(0.925)).toBe("92.5 %");
  });
});
