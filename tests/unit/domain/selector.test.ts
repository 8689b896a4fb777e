import { describe, expect, it } from "vitest";
import { blockKey, jacobianKey, selects } from "../../../shared/domain/selector.ts";
import type { Selector } from "../../../shared/domain/selector.ts";

const jacobian = { model: "rotor.thrust", point: "nominal", output: "thrust", input: "pitch", probe: "" };
const probe = { ...jacobian, probe: "dot-product: seed 7" };
const covers = (selector: Selector) => [jacobian, probe].map((block) => selects(selector, block, "default"));

describe("a selector", () => {
  it("covers a Jacobian and its probes by their names", () => {
    expect(covers({ model: "rotor.*" })).toEqual([true, true]);
    expect(covers({ output: "power" })).toEqual([false, false]);
    expect(covers({ model: "rotor.*", lane: "other" })).toEqual([false, false]);
  });

  it("with rows or columns means those of the Jacobian: a probe has none of them", () => {
    expect(covers({ rows: [0] })).toEqual([true, false]);
    expect(covers({ columns: [0] })).toEqual([true, false]);
  });

  it("that names probes covers those alone", () => {
    expect(covers({ probe: "dot-product: *" })).toEqual([false, true]);
    expect(covers({ probe: "*" })).toEqual([false, true]);
    expect(covers({ probe: "taylor: *" })).toEqual([false, false]);
    expect(covers({ probe: "dot-product: *", rows: [0] })).toEqual([false, true]);
  });

  it("takes a name without a probe for that of a Jacobian", () => {
    const { model, point, output, input } = jacobian;
    expect(selects({ rows: [0] }, { model, point, output, input }, "default")).toBe(true);
  });
});

describe("keys", () => {
  it("are the same for a Jacobian and its probes, or another for each", () => {
    expect(jacobianKey(probe)).toBe(jacobianKey(jacobian));
    expect(blockKey(probe)).not.toBe(blockKey(jacobian));
  });
});
