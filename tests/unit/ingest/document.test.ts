import { describe, expect, it } from "vitest";
import { block, build, judge, mistakes, refusal } from "./documents.ts";
import type { Document, Json } from "./documents.ts";

const derivativeAt = "#/blocks/0/derivative/values";

describe("a document", () => {
  it("may leave out all but the format, the commit, the run and its blocks' names, sizes and derivative", () => {
    const bare: Document = {
      model: "m",
      output: { name: "f", size: 1 },
      input: { name: "x", size: 1 },
      derivative: { method: "mixed", values: [[1]] },
    };
    const { header, blocks } = judge(build([bare]));
    expect(header).toMatchObject({ lane: "default", history: [] });
    expect(blocks[0]).toMatchObject({ point: "nominal", snapshot: { counts: { entries: 1, unreferenced: 1 } } });
    for (const name of Object.keys(bare)) {
      const { [name]: _, ...less } = bare;
      const [mistake] = mistakes(build([less]));
      expect(mistake).toMatch(new RegExp(`^#/blocks/0/${name}: `));
    }
    for (const name of ["format", "commit", "run", "blocks"]) {
      const { [name]: _, ...less } = build();
      expect(mistakes(less)[0]).toMatch(new RegExp(`^#/${name}: `));
    }
    expect(mistakes(build([{ ...bare, derivative: { method: "mixed" } }]))[0]).toMatch(
      new RegExp(`^${derivativeAt}: `),
    );
  });

  it("may have no blocks, and blocks without entries", () => {
    expect(judge(build([])).blocks).toEqual([]);
    const empty = { output: { name: "f", size: 0 }, input: { name: "x", size: 2 }, references: [] };
    const [one] = judge(build([block({ ...empty, derivative: { method: "analytic", values: [] } })])).blocks;
    expect(one?.snapshot).toMatchObject({ rows: 0, columns: 2, worst: null, counts: { entries: 0 } });
  });

  it("is refused for a property that nobody knows, wherever it is", () => {
    const unknown = (path: (string | number)[]): [Document, string] => {
      const document = JSON.parse(
        JSON.stringify(
          build(
            [
              block({
                references: [
                  {
                    method: "central-difference",
                    sweep: [
                      {
                        step: 1,
                        values: [
                          [1, 2],
                          [3, 4],
                          [5, 6],
                        ],
                      },
                    ],
                    cost: {},
                  },
                ],
                probes: [{ kind: "dot-product", forward: 1, reverse: 1 }],
              }),
            ],
            { shard: { index: 0, count: 1 }, history: [{ sha: "b".repeat(40), author: {} }] },
          ),
        ),
      ) as Document;
      const place = path.reduce<Json>((at, part) => (at as Record<string | number, Json>)[part] ?? null, document);
      (place as Document)["a/b~c"] = 1;
      return [document, `#/${[...path, "a~1b~0c"].join("/")}: is not a property of the format`];
    };
    for (const path of [
      [],
      ["commit"],
      ["history", 0],
      ["history", 0, "author"],
      ["run"],
      ["shard"],
      ["blocks", 0],
      ["blocks", 0, "output"],
      ["blocks", 0, "input"],
      ["blocks", 0, "derivative"],
      ["blocks", 0, "references", 0],
      ["blocks", 0, "references", 0, "cost"],
      ["blocks", 0, "references", 0, "sweep", 0],
      ["blocks", 0, "probes", 0],
    ]) {
      const [document, expected] = unknown(path);
      expect(mistakes(document)).toEqual([expected]);
    }
  });

  it("gains nothing by names of the language's own", () => {
    const text = JSON.stringify(build());
    for (const name of ["__proto__", "constructor", "prototype", "toString"]) {
      for (const spoilt of [
        text.replace("{", `{"${name}": {"lane": "stolen"}, `),
        text.replace('"model"', `"${name}": {"method": 1}, "model"`),
        text.replace('"values":[[1', `"${name}": {}, "values":[[1`),
      ]) {
        expect(mistakes(spoilt)[0], spoilt).toMatch(new RegExp(`/${name}: is not a property of the format$`));
      }
    }
    expect(({} as Record<string, unknown>).lane).toBeUndefined();
    const named = judge(build([block({ model: "__proto__" }), block({ model: "constructor" })]));
    expect(named.blocks.map(({ model }) => model)).toEqual(["__proto__", "constructor"]);
  });

  it("lists fifty mistakes and counts the rest", () => {
    const many = build(
      Array.from({ length: 73 }, (_, at) => block({ model: `m${at}`, derivative: { method: "mixed", values: 0 } })),
    );
    const numbers = refusal(many);
    expect(numbers).toMatchObject({ kind: "invalid", more: 23 });
    expect(numbers.kind === "invalid" && numbers.errors).toHaveLength(50);
    const shape = refusal(build(Array.from({ length: 73 }, () => block({ model: "not dotted words" }))));
    expect(shape).toMatchObject({ kind: "invalid", more: 23 });
  });

  it("names no block twice", () => {
    expect(mistakes(build([block(), block({ point: "stall" }), block()]))).toEqual([
      "#/blocks/2: is the same block as number 0 of this document",
    ]);
    expect(mistakes(build([block({ point: "nominal" }), block()]))).toHaveLength(1);
  });

  it.each<[string, Document]>([
    ["#/format", { format: "clinograph.build/2" }],
    ["#/commit/sha", { commit: { sha: "A".repeat(40) } }],
    ["#/commit/sha", { commit: { sha: "a".repeat(41) } }],
    ["#/commit/committedAt", { commit: { sha: "a".repeat(40), committedAt: "yesterday" } }],
    ["#/shard/index", { shard: { index: 2, count: 2 } }],
    ["#/run/url", { run: { id: "1", url: "javascript:alert(1)" } }],
    ["#/run/id", { run: { id: " " } }],
    ["#/lane", { lane: "" }],
    ["#/blocks", { blocks: { length: 3 } }],
  ])("is told of a mistake at %s", (pointer, more) => {
    expect(mistakes(build([], more))[0]?.split(": ")[0]).toBe(pointer);
  });
});

describe("the limits", () => {
  const sized = (rows: number, columns: number, more: Document = {}) =>
    block({
      model: `m${rows}.${columns}`,
      output: { name: "f", size: rows },
      input: { name: "x", size: columns },
      derivative: { method: "analytic", values: { rows: [], columns: [], values: [] } },
      references: [],
      ...more,
    });

  it("of entries and blocks are told in numbers", () => {
    const limits = { entries: 100, blocks: 2 };
    expect(refusal(build([sized(10, 10), sized(1, 1)]), { limits })).toEqual({
      kind: "too-large",
      detail: "The build has 101 entries, at most 100 are taken.",
    });
    expect(judge(build([sized(9, 11), sized(1, 1)]), { limits }).blocks).toHaveLength(2);
    expect(refusal(build([sized(1, 1), sized(1, 2), sized(1, 3)]), { limits })).toEqual({
      kind: "too-large",
      detail: "The build has 3 blocks, at most 2 are taken.",
    });
  });

  it("stop sizes that no memory holds before any is taken", () => {
    const most = 2_147_483_647;
    const values = { f64le: "" };
    for (const [rows, columns] of [
      [most, most],
      [most, 0],
      [0, most],
      [most, 1],
    ] as const) {
      const huge = sized(rows, columns, {
        output: { name: "f", size: rows, values },
        input: { name: "x", size: columns, values },
      });
      expect(refusal(build([huge])).kind, `${rows} x ${columns}`).toBe("too-large");
    }
    expect(refusal(build([sized(Number.MAX_SAFE_INTEGER, 1)])).kind).toBe("too-large");
    expect(mistakes(build([sized(2 ** 53, 1)]))).toHaveLength(1);
    expect(mistakes(build([sized(-1, 1)]))).toHaveLength(1);
  });

  it("stop columns that are named again and again, and empty matrices without number", () => {
    const empty = { rows: [], columns: [], values: [] };
    const columns = Array.from({ length: 5000 }, () => 0);
    const again = sized(1_000_000, 1, { references: [{ method: "complex-step", columns, values: empty }] });
    expect(refusal(build([again]))).toMatchObject({ kind: "invalid", more: 4949 });
    const sweep = Array.from({ length: 64 }, (_, at) => ({ step: 1 / (at + 1), values: empty }));
    const references = Array.from({ length: 32 }, () => ({ method: "central-difference", sweep }));
    expect(refusal(build([sized(1000, 4000, { references })]))).toEqual({
      kind: "too-large",
      detail: "The build has 8196000000 numbers in derivatives, references and sweeps, at most 64000000 are taken.",
    });
  });
});
