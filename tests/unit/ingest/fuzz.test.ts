import fc from "fast-check";
import { expect, it } from "vitest";
import { RejectedPosting } from "../../../server/ingest/rejection.ts";
import { block, build, judge } from "./documents.ts";
import type { Json } from "./documents.ts";

const values = [
  [1, 2],
  [3, 4],
  [5, 6],
];
/** Has every part that a document can have. */
const whole: Json = build(
  [
    block(),
    block({
      model: "mooring.tension",
      output: { name: "f", size: 3, unit: "N", values: [1, 2, 3], elements: ["a", "b", "c"] },
      derivative: {
        method: "ad-forward",
        values: { rows: [0, 2], columns: [1, 0], values: [2, "NaN"] },
        cost: { seconds: 1 },
      },
      references: [
        {
          method: "central-difference",
          stepKind: "relative",
          precision: 1e-15,
          sweep: [1e-2, 1e-3, 1e-4, 1e-5].map((step) => ({ step, values })),
        },
        { method: "forward-difference", step: [1e-6, 1e-7], values, uncertainty: values },
        { method: "complex-step", step: 1e-20, columns: [1], values: [[2], [null], ["Infinity"]] },
        { method: "high-precision", values: { f64le: Buffer.alloc(48).toString("base64") }, uncertainty: 1e-9 },
      ],
      probes: [
        { kind: "dot-product", forward: 1, reverse: 1, scale: 2 },
        { kind: "taylor", steps: [1, 0.5], remainders: [1, 0.25] },
        { kind: "directional", method: "complex-step", step: 1, derivative: [1], reference: [1] },
      ],
      sources: ["src/a.f90"],
    }),
  ],
  {
    commit: {
      sha: "a".repeat(40),
      parents: ["b".repeat(40)],
      branch: "main",
      author: { name: "Ada" },
      changedPaths: ["x"],
    },
    history: [{ sha: "b".repeat(40), committedAt: "2026-03-01T09:30:00Z" }],
    lane: "gcc",
    shard: { index: 0, count: 2 },
  },
);

/** Every place of a document, as a path. */
function placesOf(json: Json, path: readonly (string | number)[] = []): (string | number)[][] {
  if (typeof json !== "object" || json === null) return [[...path]];
  const inside = Array.isArray(json)
    ? json.flatMap((item, at) => placesOf(item, [...path, at]))
    : Object.entries(json).flatMap(([name, item]) => placesOf(item, [...path, name]));
  return [[...path], ...inside];
}
const PLACES = placesOf(whole).filter((path) => path.length > 0);

const awkward = fc.constantFrom<Json>(
  null,
  true,
  0,
  -0,
  -1,
  0.5,
  3,
  1e308,
  5e-324,
  2147483647,
  1e21,
  "",
  "NaN",
  "Infinity",
  "-Infinity",
  "__proto__",
  [],
  [[]],
  [null],
  {},
  { f64le: "" },
  { f64le: "AAAAAAAA8H8=" },
  { rows: [0], columns: [0], values: [1] },
);
const anything = fc.oneof(awkward, fc.jsonValue({ maxDepth: 2 }) as fc.Arbitrary<Json>);
const change = fc.record({
  path: fc.constantFrom(...PLACES),
  how: fc.constantFrom("set", "remove", "double"),
  to: anything,
});

/** Puts `to` at the path, takes away what is there, or says it twice; paths that went before are passed over. */
function changed(document: Json, { path, how, to }: { path: (string | number)[]; how: string; to: Json }): void {
  let at: Json = document;
  for (const part of path.slice(0, -1)) {
    if (typeof at !== "object" || at === null) return;
    at = (at as Record<string | number, Json>)[part] ?? null;
  }
  const last = path.at(-1) ?? "";
  if (Array.isArray(at)) {
    if (how === "set") at[Number(last)] = to;
    else at.splice(Number(last), how === "remove" ? 1 : 0, ...(how === "remove" ? [] : [at[Number(last)] ?? null]));
  } else if (typeof at === "object" && at !== null) {
    if (how === "remove") delete at[last];
    else at[last] = how === "set" ? to : [at[last] ?? null, at[last] ?? null];
  }
}

/** A posting is judged, or refused in the words of the house; anything else is thrown on. */
function outcomeOf(body: string | Uint8Array): "judged" | "refused" {
  try {
    judge(body);
    return "judged";
  } catch (error) {
    if (error instanceof RejectedPosting) return "refused";
    throw error;
  }
}

it("a document spoilt at random is judged or refused, nothing else", () => {
  expect(outcomeOf(JSON.stringify(whole))).toBe("judged");
  const outcomes = { judged: 0, refused: 0 };
  fc.assert(
    fc.property(fc.array(change, { minLength: 1, maxLength: 4 }), (changes) => {
      const document = structuredClone(whole);
      for (const one of changes) changed(document, one);
      outcomes[outcomeOf(JSON.stringify(document))] += 1;
    }),
    { numRuns: 500 },
  );
  expect(outcomes.judged).toBeGreaterThan(5);
  expect(outcomes.refused).toBeGreaterThan(5);
}, 30_000);

it("bytes spoilt at random are judged or refused, nothing else", () => {
  const bytes = Buffer.from(JSON.stringify(whole));
  const spoilt = fc.record({ at: fc.nat(bytes.length - 1), byte: fc.nat(255) });
  fc.assert(
    fc.property(fc.array(spoilt, { minLength: 1, maxLength: 5 }), (places) => {
      const copy = Uint8Array.from(bytes);
      for (const { at, byte } of places) copy[at] = byte;
      outcomeOf(copy);
    }),
    { numRuns: 400 },
  );
});
