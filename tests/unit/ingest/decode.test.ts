import { describe, expect, it } from "vitest";
import { assemble } from "../../../server/ingest/assemble.ts";
import type { PlaneName } from "../../../server/ingest/planes.ts";
import { PLANE_WIDTH } from "../../../server/ingest/planes.ts";
import { unpackTiles } from "../../../server/ingest/tileSet.ts";
import { toWire } from "../../../shared/schemas/common.ts";
import { VERDICTS } from "../../../shared/domain/vocabulary.ts";
import { block, build, judge, mistakes } from "./documents.ts";
import type { Document, Json } from "./documents.ts";

/** Every plane of the only block, as bytes in hexadecimal, by name, reference and step. */
function planesOf(document: Document): Record<string, string> {
  const { blocks, tiles } = judge(document);
  const unpacked = unpackTiles(tiles);
  const { planes, rows, columns } = blocks[0]!.snapshot;
  const lengths: Partial<Record<PlaneName, number>> = { outputValues: rows, inputValues: columns };
  return Object.fromEntries(
    planes.map(({ name, reference, step, tiles: places }) => {
      const stored = places.map((at) => unpacked[at]!);
      const bytes = assemble(name, stored, lengths[name] ?? rows * columns);
      expect(bytes.byteLength % PLANE_WIDTH[name]).toBe(0);
      return [`${name} ${reference} ${step}`, Buffer.from(bytes).toString("hex")];
    }),
  );
}

/** 3 x 2. */
const AWKWARD = [-0, 5e-324, NaN, Infinity, -1.5e300, 0.1];
const FINITE = [-0, 5e-324, -2.2250738585072014e-308, 1e300, 0, 0.1];
const dense = (values: number[]): Json => [0, 2, 4].map((at) => values.slice(at, at + 2).map(toWire));
const f64le = (values: number[]): Json => ({
  f64le: Buffer.from(Float64Array.from(values).buffer).toString("base64"),
});
const sparse = (values: number[]): Json => {
  const at = [3, 0, 5, 1, 4, 2].filter((k) => !Object.is(values[k], 0));
  return {
    rows: at.map((k) => Math.floor(k / 2)),
    columns: at.map((k) => k % 2),
    values: at.map((k) => toWire(values[k]!)),
  };
};
const derived = (values: Json) => block({ derivative: { method: "analytic", values } });
const referred = (values: Json) => block({ references: [{ method: "complex-step", step: 1e-20, values }] });
/** A body in which -0 keeps its minus, which no JSON writer leaves there. */
const textOf = (document: Document) =>
  JSON.stringify(document, (_, value: unknown) => (Object.is(value, -0) ? "minus zero" : value)).replaceAll(
    '"minus zero"',
    "-0",
  );

describe("a matrix", () => {
  it("gives the same planes bit for bit in each of its forms", () => {
    const forms = [dense, f64le, sparse];
    for (const make of [derived, referred]) {
      for (const values of make === derived ? [AWKWARD, FINITE] : [FINITE]) {
        const [first, ...others] = forms.map((form) => {
          const { blocks, tiles } = judge(textOf(build([make(form(values))])));
          return { hash: Buffer.from(blocks[0]!.snapshot.hash).toString("hex"), tiles: unpackTiles(tiles).length };
        });
        for (const other of others) expect(other).toEqual(first);
      }
    }
  });

  it("is stored as it was sent", () => {
    for (const values of [AWKWARD, FINITE]) {
      const bytes = Buffer.from(Float64Array.from(values).buffer).toString("hex");
      expect(planesOf(build([derived(f64le(values))]))["derivative 0 0"]).toBe(bytes);
    }
  });

  it("that is a reference may leave numbers out, in rows and in triplets", () => {
    const nullRows = planesOf(
      build([
        referred([
          [1, null],
          [3, 4],
          [null, 6],
        ]),
      ]),
    );
    const nullTriplets = planesOf(
      build([referred({ rows: [0, 0, 1, 1, 2, 2], columns: [0, 1, 0, 1, 0, 1], values: [1, null, 3, 4, null, 6] })]),
    );
    expect(nullTriplets).toEqual(nullRows);
    const verdicts = [...Buffer.from(nullRows["verdict 0 0"] ?? "", "hex")].map((code) => VERDICTS[code]);
    expect(verdicts).toEqual(["agrees", "unreferenced", "agrees", "agrees", "unreferenced", "agrees"]);
  });

  it("that is a reference may cover some columns, in any order", () => {
    const [one] = judge(
      build([
        block({
          references: [
            {
              method: "complex-step",
              step: 1e-20,
              columns: [1, 0],
              values: [
                [2, 1],
                [4, 3],
                [6, 5],
              ],
            },
          ],
        }),
      ]),
    ).blocks;
    expect(one?.snapshot.counts).toMatchObject({ agrees: 6 });
    const [other] = judge(
      build([block({ references: [{ method: "complex-step", step: 1e-20, columns: [1], values: [[2], [4], [6]] }] })]),
    ).blocks;
    expect(other?.snapshot.counts).toMatchObject({ agrees: 3, unreferenced: 3 });
  });

  it("whose reference is not finite has no reference there, and says so", () => {
    const [one] = judge(
      build([
        referred([
          ["NaN", 2],
          ["-Infinity", 4],
          [5, 6],
        ]),
      ]),
    ).blocks;
    expect(one?.snapshot.counts).toMatchObject({ agrees: 4, unreferenced: 2 });
    expect(one?.details).toContain("reference-not-finite");
  });
});

const derivative = (values: Json) => build([derived(values)]);
const reference = (more: Document) =>
  build([
    block({
      references: [
        {
          method: "central-difference",
          step: 1e-5,
          values: [
            [1, 2],
            [3, 4],
            [5, 6],
          ],
          ...more,
        },
      ],
    }),
  ]);
const output = (more: Document) => build([block({ output: { name: "thrust", size: 3, ...more } })]);
const D = "#/blocks/0/derivative/values";
const R = "#/blocks/0/references/0";

describe("a mistake of shape", () => {
  it.each<[string, Document, string]>([
    ["rows too few", derivative([[1, 2]]), `${D}: has 1 rows, expected 3`],
    [
      "transposed",
      derivative([
        [1, 3, 5],
        [2, 4, 6],
      ]),
      `${D}: has 2 rows, expected 3 (its transpose would fit: rows are output elements, columns are input elements)`,
    ],
    ["a short row", derivative([[1, 2], [3], [5, 6]]), `${D}: row 1 has 1 numbers, expected 2`],
    ["a row that is none", derivative([[1, 2], 3, [5, 6]]), `${D}/1: must be an array of numbers`],
    [
      "a null",
      derivative([
        [1, null],
        [3, 4],
        [5, 6],
      ]),
      `${D}/0/1: is null, expected a number`,
    ],
    [
      "a word",
      derivative([
        [1, "nan"],
        [3, 4],
        [5, 6],
      ]),
      `${D}/0/1: must be a number, or the string "NaN", "Infinity" or "-Infinity"`,
    ],
    ["bytes too few", derivative(f64le([1, 2])), `${D}/f64le: has 16 bytes, expected 48 (6 numbers of 8)`],
    [
      "no base64",
      derivative({ f64le: "AAA!" }),
      `${D}/f64le: must be base64 with padding (RFC 4648) of little-endian binary64 numbers`,
    ],
    [
      "triplets of different lengths",
      derivative({ rows: [0], columns: [0, 1], values: [1] }),
      `${D}: rows, columns and values have 1, 2 and 1 items, expected as many of each`,
    ],
    [
      "a triplet outside",
      derivative({ rows: [3], columns: [0], values: [1] }),
      `${D}/rows/0: must be a whole number from 0 to 2`,
    ],
    [
      "a triplet at a fraction",
      derivative({ rows: [0], columns: [0.5], values: [1] }),
      `${D}/columns/0: must be a whole number from 0 to 1`,
    ],
    [
      "a triplet twice",
      derivative({ rows: [1, 1], columns: [0, 0], values: [1, 2] }),
      `${D}/rows/1: row 1, column 0 is given twice`,
    ],
    [
      "a matrix of another form",
      derivative({ f64le: "", shape: [3, 2] }),
      `${D}: must be rows of numbers, {"f64le": "..."} or {"rows": [], "columns": [], "values": []}`,
    ],
    ["output values too many", output({ values: [1, 2, 3, 4] }), "#/blocks/0/output/values: has 4 numbers, expected 3"],
    ["names too few", output({ elements: ["x"] }), "#/blocks/0/output/elements: has 1 names, expected 3"],
    [
      "an input that is not finite",
      build([block({ input: { name: "pitch", size: 2, values: [1, "NaN"] } })]),
      "#/blocks/0/input/values/1: must be finite",
    ],
    ["a column outside", reference({ columns: [0, 2] }), `${R}/columns/1: must be below 2, the size of the input`],
    ["a column twice", reference({ columns: [0, 0] }), `${R}/columns/1: column 0 is given twice`],
    ["columns too few", reference({ columns: [0] }), `${R}/values: row 0 has 2 numbers, expected 1`],
    ["values and a sweep", reference({ sweep: [{ step: 1, values: [] }] }), `${R}: needs either values or a sweep`],
    ["a step of 0", reference({ step: 0 }), `${R}/step: must be positive and finite`],
    ["a negative step in a list", reference({ step: [1, -1] }), `${R}/step: must be positive`],
    ["steps too few", reference({ step: [1] }), `${R}/step: has 1 numbers, expected 2`],
    [
      "a step that is none",
      reference({ step: "small" }),
      `${R}/step: must be a number, or one for each covered column`,
    ],
    ["a negative uncertainty", reference({ uncertainty: -1 }), `${R}/uncertainty: must not be negative`],
    [
      "a negative uncertainty in a matrix",
      reference({
        uncertainty: [
          [1, 2],
          [3, -4],
          [5, 6],
        ],
      }),
      `${R}/uncertainty/1/1: must not be negative`,
    ],
    [
      "a negative uncertainty in base64",
      reference({ uncertainty: f64le([1, 2, 3, -4, 5, 6]) }),
      `${R}/uncertainty: number 3 is -4, expected one that is not negative`,
    ],
  ])("(%s) is told at its place", (_, document, expected) => {
    expect(mistakes(document)).toEqual([expected]);
  });

  it("in a sweep is told at its step", () => {
    const sweep = (steps: Json) => build([block({ references: [{ method: "central-difference", sweep: steps }] })]);
    const good = [
      [1, 2],
      [3, 4],
      [5, 6],
    ];
    expect(
      mistakes(
        sweep([
          { step: 1e-2, values: good },
          { step: 1e-3, values: [[1, 2]] },
        ]),
      ),
    ).toEqual([`${R}/sweep/1/values: has 1 rows, expected 3`]);
    expect(mistakes(sweep([{ step: 1e-2, values: good }, { values: good }]))).toEqual([
      `${R}/sweep/1/step: is missing`,
    ]);
    expect(mistakes(reference({ values: 1, step: 1 }))[0]).toMatch(
      /^#\/blocks\/0\/references\/0\/values: must be rows/,
    );
    expect(mistakes(build([block({ references: [{ method: "complex-step", step: 1 }] })]))).toEqual([
      `${R}: needs either values or a sweep`,
    ]);
  });

  it("in a probe is told at the shorter list", () => {
    const probes: Json = [
      { kind: "taylor", steps: [1, 2, 3], remainders: [1, 2] },
      { kind: "directional", method: "complex-step", derivative: [1], reference: [1, 2] },
    ];
    expect(mistakes(build([block({ probes })]))).toEqual([
      "#/blocks/0/probes/0/remainders: has 2 numbers, expected 3",
      "#/blocks/0/probes/1/reference: has 2 numbers, expected 1",
    ]);
  });

  it("of a number beyond binary64 is told wherever one may stand", () => {
    const beyond = (document: Document) => mistakes(JSON.stringify(document).replaceAll('"beyond"', "1e999"));
    const detail = 'is too large for binary64; an overflow is sent as the string "Infinity"';
    expect(
      beyond(
        derivative([
          ["beyond", 2],
          [3, 4],
          [5, 6],
        ]),
      ),
    ).toEqual([`${D}/0/0: ${detail}`]);
    expect(
      beyond(
        reference({
          values: [
            [1, 2],
            [3, "beyond"],
            [5, 6],
          ],
        }),
      ),
    ).toEqual([`${R}/values/1/1: ${detail}`]);
    expect(beyond(reference({ uncertainty: "beyond" }))).toEqual([`${R}/uncertainty: ${detail}`]);
    expect(beyond(reference({ step: "beyond" }))).toEqual([`${R}/step: must be positive and finite`]);
    expect(beyond(output({ values: [1, 2, "beyond"] }))).toEqual([`#/blocks/0/output/values/2: ${detail}`]);
    expect(beyond(reference({ precision: "beyond" }))).toHaveLength(1);
  });
});
