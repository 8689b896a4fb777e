/** Every row of the definition of motion (section 3 of the judging rules), and entries that have no number to move. */
import { describe, expect, it } from "vitest";
import type { Motion, Verdict } from "../../shared/domain/vocabulary.ts";
import { MOTIONS, VERDICT_CODE } from "../../shared/domain/vocabulary.ts";
import { blockMotion } from "../../shared/numerics/motion/blockMotion.ts";
import type { MotionSide } from "../../shared/numerics/types.ts";

interface Side {
  readonly a: number;
  readonly r: number;
  /** Relative uncertainty. */
  readonly resolution?: number;
  readonly output?: number | null;
  readonly floor?: number;
}

function sideOf({ a, r, resolution = 1e-9, output = 5, floor = 1e-3 }: Side): MotionSide {
  return {
    derivative: Float64Array.of(a),
    reference: Float64Array.of(r),
    resolution: Float32Array.of(Number.isNaN(r) ? NaN : resolution),
    floor,
    outputValues: output === null ? null : Float64Array.of(output),
  };
}

function motionOf(before: Side, now: Side, verdict: Verdict): Motion | undefined {
  const side = { ...sideOf(now), verdict: Uint8Array.of(VERDICT_CODE[verdict]) };
  const { motion, counts } = blockMotion(side, sideOf(before), 1, 1);
  const found = MOTIONS[motion[0] ?? -1];
  // The counts are kept apart from the plane: they must say the same.
  for (const name of MOTIONS) expect(counts[name], name).toBe(name === found ? 1 : 0);
  return found;
}

describe("a reference that can tell", () => {
  const before: Side = { a: 2, r: 2 };
  it.each<[Motion, Side, Verdict]>([
    ["still", { a: 2, r: 2 }, "agrees"],
    ["still", { a: 2 * (1 + 0.9e-12), r: 2 * (1 + 1e-9) }, "agrees"],
    ["derivative-only", { a: 2 * (1 + 1.1e-12), r: 2 }, "agrees"],
    ["derivative-only", { a: -2, r: 2 }, "disagrees"],
    ["model-only", { a: 2, r: 2.1 }, "disagrees"],
    ["model-only", { a: 2, r: 2 * (1 + 3e-9) }, "agrees"],
    ["together", { a: 3, r: 3 }, "agrees"],
    ["apart", { a: 3, r: 4 }, "disagrees"],
    ["apart", { a: 3, r: 3.1 }, "unresolved"],
  ])("%s: now %j, which %s", (motion, now, verdict) => {
    expect(motionOf(before, now, verdict)).toBe(motion);
  });

  it("takes the sum of both uncertainties as its limit", () => {
    const coarse: Side = { a: 2, r: 2, resolution: 0.1 };
    expect(motionOf(coarse, { a: 2, r: 2.35, resolution: 0.1 }, "unresolved")).toBe("still");
    expect(motionOf(coarse, { a: 2, r: 2.5, resolution: 0.1 }, "disagrees")).toBe("model-only");
    expect(motionOf(coarse, { a: 2, r: 2.35, resolution: 1e-9 }, "disagrees")).toBe("model-only");
  });

  it("does not need F to move, nor is moved by F", () => {
    expect(motionOf({ ...before, output: 5 }, { a: 2, r: 2, output: 6 }, "agrees")).toBe("still");
    expect(motionOf({ ...before, output: null }, { a: 2, r: 2.1, output: null }, "disagrees")).toBe("model-only");
  });
});

describe("a reference that is too coarse to tell", () => {
  const before: Side = { a: 2, r: 2, resolution: 0.5 };
  it.each<[Motion, Side, Verdict]>([
    ["still", { a: 2, r: 2.1, resolution: 0.5, output: 5 }, "unresolved"],
    ["still", { a: 2, r: 2.1, resolution: 0.5, output: 5 * (1 + 0.9e-12) }, "unresolved"],
    ["model-only", { a: 2, r: 2.1, resolution: 0.5, output: 5 * (1 + 1e-9) }, "unresolved"],
    ["model-only", { a: 2, r: 2.1, resolution: 0.5, output: -5 }, "unresolved"],
    ["derivative-only", { a: 2.1, r: 2.1, resolution: 0.5, output: 5 }, "unresolved"],
    ["apart", { a: 2.1, r: 2.1, resolution: 0.5, output: 6 }, "unresolved"],
    ["together", { a: 2.1, r: 2.1, resolution: 0.5, output: 6 }, "agrees"],
    ["derivative-only", { a: 9, r: 2.1, resolution: 0.5, output: 6 }, "disagrees"],
  ])("%s: now %j, which is %s", (motion, now, verdict) => {
    expect(motionOf(before, now, verdict)).toBe(motion);
  });

  it("is not asked for where F is unknown on either side", () => {
    expect(motionOf({ ...before, output: null }, { a: 2, r: 2.1, resolution: 0.5, output: 6 }, "unresolved")).toBe(
      "still",
    );
    expect(motionOf(before, { a: 2, r: 2.1, resolution: 0.5, output: null }, "unresolved")).toBe("still");
  });

  it("includes one that cannot tell at all", () => {
    const blind: Side = { a: 2, r: 0, resolution: Infinity };
    expect(motionOf(blind, { a: 2, r: 0, resolution: Infinity, output: 6 }, "unresolved")).toBe("model-only");
    expect(motionOf(blind, { a: 2, r: 0, resolution: Infinity }, "unresolved")).toBe("still");
  });
});

describe("entries that have no number", () => {
  const good: Side = { a: 2, r: 2 };
  it.each<[Motion, Side, Side, Verdict]>([
    ["derivative-only", good, { a: NaN, r: 2 }, "invalid"],
    ["derivative-only", { a: NaN, r: 2 }, good, "agrees"],
    ["derivative-only", good, { a: Infinity, r: 2 }, "invalid"],
    ["derivative-only", { a: Infinity, r: 2 }, { a: -Infinity, r: 2 }, "invalid"],
    ["still", { a: NaN, r: 2 }, { a: NaN, r: 2 }, "invalid"],
    ["still", { a: Infinity, r: 2 }, { a: Infinity, r: 2 }, "invalid"],
    ["model-only", { a: NaN, r: 2 }, { a: NaN, r: 3 }, "invalid"],
    ["apart", good, { a: NaN, r: 3 }, "invalid"],
    ["still", { a: 2, r: NaN }, { a: 2, r: NaN }, "unreferenced"],
    ["still", good, { a: 2, r: NaN }, "unreferenced"],
    ["still", { a: 2, r: NaN }, good, "agrees"],
    ["derivative-only", { a: 2, r: NaN }, { a: 3, r: NaN }, "unreferenced"],
    ["model-only", { a: 2, r: NaN }, { a: 2, r: NaN, output: 6 }, "unreferenced"],
    ["apart", { a: 2, r: NaN }, { a: 3, r: NaN, output: 6 }, "unreferenced"],
    ["together", { a: 2, r: NaN }, { a: 3, r: 3, output: 6 }, "agrees"],
    ["still", { a: 2, r: 2, output: NaN }, { a: 2, r: NaN, output: NaN }, "unreferenced"],
    ["model-only", { a: 2, r: 2, output: 5 }, { a: 2, r: NaN, output: NaN }, "unreferenced"],
  ])("%s: %j, now %j, which is %s", (motion, before, now, verdict) => {
    expect(motionOf(before, now, verdict)).toBe(motion);
  });
});

describe("sizes", () => {
  it("below the floor move relative to the floor", () => {
    expect(motionOf({ a: 1e-20, r: 0 }, { a: 1.5e-20, r: 0 }, "agrees")).toBe("still");
    expect(motionOf({ a: 0, r: 0 }, { a: 1e-14, r: 0 }, "agrees")).toBe("derivative-only");
    expect(motionOf({ a: 0, r: 0 }, { a: -0, r: -0 }, "agrees")).toBe("still");
  });

  it("at the ends of the range neither overflow nor vanish", () => {
    const huge = 1.7e308;
    expect(motionOf({ a: huge, r: huge }, { a: -huge, r: -huge }, "agrees")).toBe("together");
    expect(motionOf({ a: huge, r: huge }, { a: huge, r: huge }, "agrees")).toBe("still");
    const tiny: Side = { a: 5e-324, r: 5e-324, floor: 0 };
    expect(motionOf(tiny, { a: 1e-323, r: 5e-324, floor: 0 }, "disagrees")).toBe("derivative-only");
  });
});

describe("shapes", () => {
  it("of several rows take each row's own F", () => {
    const coarse = (outputs: number[]) => ({
      derivative: new Float64Array(4).fill(1),
      reference: new Float64Array(4).fill(1),
      resolution: new Float32Array(4).fill(1),
      floor: 1,
      outputValues: Float64Array.from(outputs),
      verdict: new Uint8Array(4).fill(VERDICT_CODE.unresolved),
    });
    const { motion, counts } = blockMotion(coarse([1, 3]), coarse([1, 2]), 2, 2);
    expect([...motion].map((code) => MOTIONS[code])).toEqual(["still", "still", "model-only", "model-only"]);
    expect(counts).toMatchObject({ still: 2, "model-only": 2 });
  });

  it("may be empty, and are named when wrong", () => {
    const empty = { ...sideOf({ a: 1, r: 1 }), outputValues: new Float64Array(0), verdict: new Uint8Array(0) };
    const nothing = {
      derivative: new Float64Array(0),
      reference: new Float64Array(0),
      resolution: new Float32Array(0),
    };
    expect(blockMotion({ ...empty, ...nothing }, { ...empty, ...nothing }, 0, 4).motion.length).toBe(0);
    const one = { ...sideOf({ a: 1, r: 1 }), verdict: new Uint8Array(1) };
    const two = new Float64Array(2);
    expect(() => blockMotion({ ...one, derivative: two }, one, 1, 1)).toThrow(/^now\.derivative:/);
    expect(() => blockMotion({ ...one, verdict: new Uint8Array(2) }, one, 1, 1)).toThrow(/^now\.verdict:/);
    expect(() => blockMotion({ ...one, outputValues: two }, one, 1, 1)).toThrow(/^now\.outputValues:/);
    expect(() => blockMotion(one, { ...one, reference: two }, 1, 1)).toThrow(/^before\.reference:/);
    expect(() => blockMotion(one, { ...one, resolution: new Float32Array(2) }, 1, 1)).toThrow(/^before\.resolution:/);
    expect(() => blockMotion(one, { ...one, derivative: two }, 1, 1)).toThrow(RangeError);
  });
});
