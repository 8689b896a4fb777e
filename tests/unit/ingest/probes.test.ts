import { describe, expect, it } from "vitest";
import type { BlockDetails } from "../../../server/ingest/blockDetails.ts";
import { buildDocument } from "../../../shared/schemas/build.ts";
import { DEFAULT_TOLERANCES } from "../../../shared/domain/tolerances.ts";
import { block, build, judge, mistakes, refusal } from "./documents.ts";
import type { Document, Json } from "./documents.ts";

const dot = (more: Document = {}): Json => ({ kind: "dot-product", forward: 1, reverse: 1, scale: 2, ...more });
const taylor = (more: Document = {}): Json => ({
  kind: "taylor",
  steps: [1e-2, 1e-3, 1e-4],
  remainders: [1e-4, 1e-6, 1e-8],
  scale: 1,
  value: 1,
  ...more,
});
const directional = (more: Document = {}): Json => ({
  kind: "directional",
  method: "ad-forward",
  derivative: [1, 2, 3],
  reference: [1, 2, 3],
  ...more,
});

const probed = (...probes: Json[]): Document => block({ probes });
/** Without its Jacobian. */
const only = (probes: Json[], more: Document = {}): Document =>
  block({ derivative: { method: "ad-reverse" }, references: [], probes, ...more });
const P = "#/blocks/0/probes";

describe("probes of a block", () => {
  it("are judged as blocks of their own beside it, under their kinds and labels", () => {
    const { blocks } = judge(
      build([probed(dot(), dot({ label: "seed 7" }), dot(), taylor(), directional({ label: "along x" }))]),
    );
    expect(blocks.map(({ probe }) => probe)).toEqual([
      "",
      "dot-product: 1",
      "dot-product: seed 7",
      "dot-product: 3",
      "taylor: 1",
      "directional: along x",
    ]);
    expect(new Set(blocks.map(({ model, output, input, point }) => [model, output, input, point].join()))).toHaveLength(
      1,
    );
    expect(blocks.map(({ snapshot }) => [snapshot.rows, snapshot.columns])).toEqual([
      [3, 2],
      [1, 1],
      [1, 1],
      [1, 1],
      [1, 1],
      [3, 1],
    ]);
    expect(blocks.slice(1).every(({ snapshot }) => snapshot.counts.agrees === snapshot.counts.entries)).toBe(true);
  });

  it("carry what their pages show, and the block itself none of it", () => {
    const [jacobian, product, remainder, direction] = judge(
      build([probed(dot({ reverse: 1.5 }), taylor(), directional({ derivative: [1, 2, 4] }))]),
    ).blocks.map(({ details }) => JSON.parse(details) as BlockDetails);
    expect(jacobian).not.toHaveProperty("probe");
    expect(jacobian).not.toHaveProperty("probes");
    expect(product?.probe).toMatchObject({ kind: "dot-product", label: "1", verdict: "disagrees", error: 0.25 });
    expect(product?.probe?.sentence).toBe("forward and reverse differ by 0.25 of their size, 1.0 × 10⁻¹⁰ is allowed");
    expect(remainder?.probe).toMatchObject({
      kind: "taylor",
      verdict: "agrees",
      slope: 2,
      usableSteps: 3,
      tolerance: 1e-6,
    });
    expect(direction?.probe).toMatchObject({ kind: "directional", verdict: "disagrees", tolerance: 1e-6 });
    expect(direction?.probe?.sentence).toMatch(/^the directional derivative is in 1 of 3 elements off by up to 0\.33/);
    expect(product?.output).toEqual({ unit: null, elements: null });
  });

  it("have a snapshot of their own where only the verdict or the scale is another", () => {
    const hashOf = (probe: Json) => Buffer.from(judge(build([only([probe])])).blocks[0]!.snapshot.hash).toString("hex");
    const hashes = [dot(), dot({ scale: 3 }), dot({ precision: 1e-3 }), taylor(), taylor({ scale: 2 })].map(hashOf);
    expect(new Set(hashes)).toHaveLength(hashes.length);
    expect(hashOf(dot())).toBe(hashes[0]);
  });

  it("take the size of the function from the one output that a block has", () => {
    const sole = { output: { name: "cost", size: 1, values: [1e9] } };
    const verdictOf = (more: Document) => {
      const probe = taylor({ remainders: [1e-8, 1e-8, 1e-8], scale: 1e-3 }) as Document;
      delete probe.value;
      const { details } = judge(build([only([probe], more)])).blocks[0]!;
      return (JSON.parse(details) as BlockDetails).probe;
    };
    expect(verdictOf(sole)).toMatchObject({ verdict: "unresolved", assumed: false });
    expect(verdictOf({})).toMatchObject({ assumed: true });
  });

  it("that are not finite are invalid", () => {
    const { blocks } = judge(
      build([
        only([
          dot({ forward: "NaN" }),
          taylor({ remainders: [1, "Infinity", 1] }),
          directional({ derivative: ["NaN", 2, 3] }),
        ]),
      ]),
    );
    expect(blocks.map(({ snapshot }) => snapshot.counts.invalid)).toEqual([1, 1, 1]);
  });

  it("follow the tolerance of their block", () => {
    const off = taylor({ remainders: [1e-5, 1e-6, 1e-7] });
    expect(judge(build([only([off])])).blocks[0]!.snapshot.counts.disagrees).toBe(1);
    expect(judge(build([only([off])])).blocks[0]!.snapshot.rtol).toBe(DEFAULT_TOLERANCES.rtol);
  });
});

describe("a block without its Jacobian", () => {
  it("is recorded by its probes alone, whatever its sizes", () => {
    const size = Number.MAX_SAFE_INTEGER;
    const huge = only([dot(), taylor()], { output: { name: "f", size }, input: { name: "x", size } });
    const { blocks } = judge(build([huge]), { limits: { entries: 2 } });
    expect(blocks.map(({ probe }) => probe)).toEqual(["dot-product: 1", "taylor: 1"]);
    // Sums of so many terms may round to anything.
    expect(blocks[0]!.snapshot.counts.unresolved).toBe(1);
  });

  it("needs probes, and no references", () => {
    const detail = "is missing: only a block with probes and without references may leave it out";
    const place = "#/blocks/0/derivative/values";
    expect(mistakes(build([only([])]))).toEqual([`${place}: ${detail}`]);
    const referenced = block({ derivative: { method: "analytic" }, probes: [dot()] });
    expect(mistakes(build([referenced]))).toEqual([`${place}: ${detail}`]);
    expect(mistakes(build([only([dot()], { derivative: { method: "analytic", values: null } })]))).toHaveLength(1);
  });

  it("is the same block as one with it", () => {
    expect(mistakes(build([block(), only([dot()])]))).toEqual([
      "#/blocks/1: is the same block as number 0 of this document",
    ]);
  });

  it("may have output and input values, as many as it says", () => {
    const sized = (size: number) => only([dot()], { output: { name: "f", size, values: [1, 2, 3] } });
    expect(judge(build([sized(3)])).blocks).toHaveLength(1);
    expect(mistakes(build([sized(Number.MAX_SAFE_INTEGER)]))).toEqual([
      `#/blocks/0/output/values: has 3 numbers, expected ${Number.MAX_SAFE_INTEGER}`,
    ]);
    const binary = only([dot()], { output: { name: "f", size: 1e15, values: { f64le: "AAAAAAAAAAA=" } } });
    expect(mistakes(build([binary]))[0]).toContain("has 8 bytes, expected 8000000000000000");
  });
});

describe("a mistake in a probe", () => {
  it.each<[string, Json[], string[]]>([
    [
      "two of one label",
      [dot({ label: "a" }), dot({ label: "a" })],
      [`${P}/1/label: is that of probe 0 as well (dot-product: a)`],
    ],
    [
      "a label that is another's number",
      [dot({ label: "2" }), dot()],
      [`${P}/1/label: is that of probe 0 as well (dot-product: 2)`],
    ],
    [
      "steps in no order",
      [taylor({ steps: [1e-2, 1e-4, 1e-3] })],
      [`${P}/0/steps/2: breaks the order of the steps: each must be smaller than the one before, or each larger`],
    ],
    [
      "a step twice",
      [taylor({ steps: [1e-2, 1e-3, 1e-3] })],
      [`${P}/0/steps/2: is the step before it again: each must be smaller than the one before, or each larger`],
    ],
    ["lists of two lengths", [taylor({ remainders: [1, 1] })], [`${P}/0/remainders: has 2 numbers, expected 3`]],
    ["a direction of two lengths", [directional({ reference: [1] })], [`${P}/0/reference: has 1 numbers, expected 3`]],
  ])("%s is told at its place", (_, probes, expected) => {
    expect(mistakes(build([probed(...probes)]))).toEqual(expected);
  });

  it.each<[string, Json, string]>([
    ["a negative scale", dot({ scale: -1 }), "scale"],
    ["a negative scale of remainders", taylor({ scale: -1 }), "scale"],
    ["a negative value", taylor({ value: -1 }), "value"],
    ["a precision of 0", taylor({ precision: 0 }), "precision"],
    ["one step", taylor({ steps: [1], remainders: [1] }), "steps"],
    ["a step of 0", taylor({ steps: [1, 0, -1] }), "steps/1"],
    ["no direction at all", directional({ derivative: [], reference: [] }), "derivative"],
    ["an unknown field", dot({ tolerance: 1 }), "tolerance"],
  ])("%s is refused", (_, probe, place) => {
    expect(mistakes(build([probed(probe)]))[0]).toMatch(new RegExp(`^${P}/0/${place}: `));
  });

  it("same labels of two kinds, and steps from small to large, are none", () => {
    const rising = taylor({ label: "a", steps: [1e-4, 1e-3, 1e-2], remainders: [1e-8, 1e-6, 1e-4] });
    expect(judge(build([probed(dot({ label: "a" }), rising)])).blocks).toHaveLength(3);
  });
});

describe("limits", () => {
  it("count probes, and the numbers of directional ones", () => {
    const limits = { blocks: 2, entries: 8 };
    expect(judge(build([only([dot(), dot()])]), { limits }).blocks).toHaveLength(2);
    expect(refusal(build([only([dot(), dot(), dot()])]), { limits })).toEqual({
      kind: "too-large",
      detail: "The build has 3 probes, at most 2 are taken.",
    });
    expect(refusal(build([probed(directional())]), { limits })).toMatchObject({ kind: "too-large" });
  });
});

describe("the API document", () => {
  it("takes what the decoder takes", () => {
    for (const probe of [dot(), taylor(), directional()]) {
      expect(buildDocument.safeParse(build([only([probe])])).success).toBe(true);
      expect(buildDocument.safeParse(build([probed(probe)])).success).toBe(true);
    }
    expect(buildDocument.safeParse(build([only([taylor({ scale: -1 })])])).success).toBe(false);
  });
});
