import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES, tolerancesFor } from "../../../shared/domain/tolerances.ts";

const block = { model: "rotor.thrust", point: "nominal", output: "thrust", input: "pitch" };

describe("tolerancesFor", () => {
  it("is the project's without a rule that names the block", () => {
    const rules = [{ selector: { model: "wake.*" }, rtol: 1e-3 }];
    expect(tolerancesFor(DEFAULT_TOLERANCES, rules, block, "default")).toEqual(DEFAULT_TOLERANCES);
  });

  it("lays later rules over earlier ones, each for what it sets", () => {
    const rules = [
      { selector: { model: "rotor.*" }, rtol: 1e-4, floorAbs: 1e-9 },
      { selector: { input: "pitch", lane: "single" }, rtol: 1e-3 },
    ];
    const common = { ...DEFAULT_TOLERANCES, floorAbs: 1e-9 };
    expect(tolerancesFor(DEFAULT_TOLERANCES, rules, block, "single")).toEqual({ ...common, rtol: 1e-3 });
    expect(tolerancesFor(DEFAULT_TOLERANCES, rules, block, "default")).toEqual({ ...common, rtol: 1e-4 });
  });
});
