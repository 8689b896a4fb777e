import { mount } from "@vue/test-utils";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import RulerScale from "../../src/components/common/RulerScale.vue";
import { LANDMARKS, rulerError, rulerPlace } from "../../src/drawing/decades.ts";

describe("the ruler of decades", () => {
  it("stands 10^-16 at the foot, 10^0 at the head and a decade every sixteenth", () => {
    expect(rulerPlace(1e-16)).toBeCloseTo(0, 12);
    expect(rulerPlace(1e-6)).toBeCloseTo(10 / 16, 12);
    expect(rulerPlace(1)).toBe(1);
  });
  it("holds what lies beyond its ends, and what is no number, at the ends", () => {
    expect(rulerPlace(0)).toBe(0);
    expect(rulerPlace(1e-30)).toBe(0);
    expect(rulerPlace(1e9)).toBe(1);
    expect(rulerPlace(Number.POSITIVE_INFINITY)).toBe(1);
    expect(rulerPlace(Number.NaN)).toBe(1);
  });
  it("is undone by rulerError inside, and keeps order everywhere", () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-15, max: 0.9, noNaN: true }), (error) => {
        expect(rulerError(rulerPlace(error)) / error).toBeCloseTo(1, 9);
      }),
    );
    fc.assert(
      fc.property(fc.double({ min: 0, noNaN: true }), fc.double({ min: 0, noNaN: true }), (a, b) => {
        expect(rulerPlace(Math.min(a, b))).toBeLessThanOrEqual(rulerPlace(Math.max(a, b)));
      }),
    );
  });
  it("has the landmarks of binary64 and binary32", () => {
    const at = Object.fromEntries(LANDMARKS.map((landmark) => [landmark.name, landmark.at]));
    expect(at.roundoff).toBe(1.1102230246251565e-16);
    expect(at["forward difference"]).toBeCloseTo(1.0536712127723509e-8, 20);
    expect(at["central difference"]! ** 1.5 / 2 ** -53).toBeCloseTo(1, 12);
    expect(at.binary32).toBe(5.960464477539063e-8);
  });
});

describe("a ruler in a table", () => {
  const draw = (props: Record<string, unknown>) =>
    mount(RulerScale, { props: { error: 1e-4, verdict: "disagrees", tolerance: 1e-6, width: 176, ...props } as never });

  it("puts the mark at its decade: 160 px for 16 decades here", () => {
    expect(draw({}).find("g").attributes("transform")).toBe("translate(122 6)");
    expect(draw({ error: 1e-16 }).find("g").attributes("transform")).toBe("translate(2 6)");
  });
  it("hatches from the foot up to what the reference can see", () => {
    expect(Number(draw({ resolution: 1e-8 }).find("rect").attributes("width"))).toBeCloseTo(80, 6);
    expect(draw({ resolution: null }).find("rect").exists()).toBe(false);
  });
  it("says all of it in words too", () => {
    expect(draw({ resolution: 1e-8 }).attributes("aria-label")!.replaceAll("\u00a0", " ")).toBe(
      "relative error 1.0 × 10⁻⁴, disagrees; tolerance 1.0 × 10⁻⁶; the reference sees down to 1.0 × 10⁻⁸",
    );
    expect(draw({ error: null, verdict: "unreferenced" }).find("g").exists()).toBe(false);
  });
});
