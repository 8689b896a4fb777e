import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { stepStudy } from "../../shared/schemas/steps.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import { buildOf, commitOf, post } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

type Block = BuildDocument["blocks"][number];

/** exp(x0) + x1^3 at (1, 2), differences really made; the two columns have steps of their own. */
const X = [1, 2] as const;
const f = (x0: number, x1: number) => Math.exp(x0) + x1 ** 3;
const central = (h: readonly [number, number]) => [
  [
    (f(X[0] + h[0], X[1]) - f(X[0] - h[0], X[1])) / (2 * h[0]),
    (f(X[0], X[1] + h[1]) - f(X[0], X[1] - h[1])) / (2 * h[1]),
  ],
];
const forwardOf1 = (h: number) => [[(f(X[0], X[1] + h) - f(X[0], X[1])) / h]];
const slope = [[Math.E, 12]];

function curved(references: Block["references"]): Block {
  return {
    model: "curved.part",
    output: { name: "f", size: 1, values: [f(...X)] },
    input: { name: "x", size: 2, values: [...X], elements: ["warm", "cold"] },
    derivative: { method: "analytic", values: slope },
    references,
    sources: [],
  };
}
const sweep = [1e-2, 1e-3, 1e-4, 1e-5].map((h) => {
  const step: [number, number] = [h, 2 * h];
  return { step, values: central(step) };
});
const references: Block["references"] = [
  { method: "central-difference", sweep },
  { method: "forward-difference", step: 1e-10, columns: [1], values: forwardOf1(1e-10) },
  { method: "ad-forward", values: slope },
  { method: "central-difference", step: 1e-5, values: central([1e-5, 1e-5]), uncertainty: 1 },
];

let server: TestServer;
let hull: SeededProject;
let build: string;
let blockId: string;
beforeAll(async () => {
  server = await startTestServer();
  hull = await server.seedProject("hull", { "viewer@example.org": "viewer" });
  await server.seedProject("keel", { "stranger@example.org": "lead" });
  build = (await post(server, hull, buildOf(commitOf(1), [curved(references)]))).build.id;
  const blocks = await read(`/builds/${build}/blocks`);
  blockId = blocks.body.items[0].blockId;
});
afterAll(() => server.close());

const read = (path: string, token = hull.tokens.read) =>
  server.guest().get(`/api/v1/projects/hull${path}`).set("Authorization", `Bearer ${token}`);
const steps = (query = "", block = blockId) => read(`/builds/${build}/blocks/${block}/steps${query}`);
const studied = async (query = "") => stepStudy.parse((await steps(query)).body);

describe("the steps of a reference", () => {
  it("are studied from the record, each column by its own steps", async () => {
    const study = await studied();
    expect(study).toMatchObject({
      reference: 0,
      method: "central-difference",
      measured: true,
      stated: false,
      window: [0, 2],
      blockColumns: 2,
      totals: { entries: 2, resolved: 2 },
      advice: ["Central differences at steps from 0.02 to 10⁻⁵ resolve every entry at 10⁻⁶."],
    });
    const [warm, cold] = study.columns;
    expect(warm?.steps.map(({ step }) => step)).toEqual([1e-2, 1e-3, 1e-4, 1e-5]);
    expect(cold?.steps.map(({ step }) => step)).toEqual([2e-2, 2e-3, 2e-4, 2e-5]);
    expect(warm?.steps.map(({ branch }) => branch)).toEqual(["truncation", "truncation", "truncation", "rounding"]);
    expect(warm?.steps.at(-1)?.chosen).toBe(1);
  });

  it("say what the judge said of the block", async () => {
    const single = await server.seedProject("single");
    const alone = (await post(server, single, buildOf(commitOf(1), [curved([references[0]!])]))).build.id;
    const address = `/api/v1/projects/single/builds/${alone}/blocks`;
    const get = (path: string) => server.guest().get(path).set("Authorization", `Bearer ${single.tokens.read}`);
    const [row] = (await get(address)).body.items;
    const judged = (await get(`${address}/${row.blockId}`)).body;
    const study = stepStudy.parse((await get(`${address}/${row.blockId}/steps`)).body);
    study.columns.forEach(({ steps: list, column }) => {
      const chosen = list.find((step) => step.chosen > 0);
      const resolution = judged.uncertainty[column] / Math.abs(judged.reference[column]);
      expect(Number(chosen?.uncertainty.median) / resolution).toBeCloseTo(1, 6);
    });
  });

  it("of a reference over some columns are those of its columns, with advice", async () => {
    const study = await studied("?reference=1");
    expect(study.columns.map(({ column }) => column)).toEqual([1]);
    expect(study.measured).toBe(false);
    expect(study.advice[0]).toMatch(
      /^Forward differences at 10⁻¹⁰ cannot see 10⁻⁶ here; a (forward|central) step near .* would resolve every entry\.$/,
    );
    expect((await studied("?reference=1&column=0")).columns).toEqual([]);
  });

  it("of a method without steps there are none; a stated uncertainty decides what is resolved", async () => {
    expect(await studied("?reference=2")).toMatchObject({
      advice: ["The forward AD reference resolves every entry at 10⁻⁶."],
      columns: [{ steps: [], candidates: [] }, { steps: [] }],
    });
    expect(await studied("?reference=3")).toMatchObject({ stated: true, totals: { entries: 2, resolved: 0 } });
  });

  it("are answered by windows of columns", async () => {
    expect((await studied("?columns=1:2")).columns.map(({ column }) => column)).toEqual([1]);
    expect((await studied("?column=0")).window).toEqual([0, 1]);
    const wide = curved([{ method: "central-difference", step: 1e-5, values: [Array(300).fill(1)] }]);
    wide.input = { name: "x", size: 300 };
    wide.derivative.values = [Array(300).fill(1)];
    const other = (await post(server, hull, buildOf(commitOf(2), [{ ...wide, model: "wide" }]))).build.id;
    const [row] = (await read(`/builds/${other}/blocks`)).body.items;
    const of = (query: string) => read(`/builds/${other}/blocks/${row.blockId}/steps${query}`);
    expect((await of("")).body).toMatchObject({ window: [0, 200], blockColumns: 300 });
    expect((await of("?columns=200:300")).body.columns).toHaveLength(100);
    const refused = await of("?columns=0:201");
    expect(refused.status).toBe(422);
    expect(refused.body.errors[0].pointer).toBe("#/query/columns");
  });

  it.each([
    ["?reference=4", "#/query/reference"],
    ["?reference=-1", "#/query/reference"],
    ["?column=2", "#/query/column"],
    ["?columns=1:3", "#/query/columns"],
    ["?columns=2:1", "#/query/columns"],
    ["?columns=0:1&column=0", "#/query/columns"],
    ["?columns=a", "#/query/columns"],
    ["?kolumn=1", "#/query"],
  ])("refuse %s", async (query, pointer) => {
    const refused = await steps(query);
    expect(refused.status).toBe(422);
    expect(refused.body.errors[0].pointer).toContain(pointer);
  });

  it("are not found elsewhere, nor shown to those who may not read", async () => {
    expect((await steps("", "999999")).status).toBe(404);
    expect((await read(`/builds/999999/blocks/${blockId}/steps`)).status).toBe(404);
    const path = `/api/v1/projects/hull/builds/${build}/blocks/${blockId}/steps`;
    expect((await server.guest().get(path)).status).toBe(401);
    expect((await read(`/builds/${build}/blocks/${blockId}/steps`, hull.tokens.post)).status).toBe(403);
    expect((await (await server.agent("stranger@example.org")).get(path)).status).toBe(404);
    expect((await (await server.agent("viewer@example.org")).get(path)).status).toBe(200);
  });

  it("tell of references that conflict, and of a complex step that lost its imaginary part", async () => {
    const dropped = curved([
      { method: "central-difference", sweep },
      { method: "complex-step", step: 1e-20, values: [[0, 12]] },
    ]);
    const off = curved([
      { method: "ad-forward", values: [[Math.E, 12.5]] },
      { method: "ad-reverse", values: slope },
    ]);
    const sent = [
      { ...dropped, model: "dropped" },
      { ...off, model: "off" },
    ];
    const other = (await post(server, hull, buildOf(commitOf(3), sent))).build.id;
    const rows: { model: string; blockId: string }[] = (await read(`/builds/${other}/blocks`)).body.items;
    const adviceOf = async (model: string, reference: number) => {
      const id = rows.find((row) => row.model === model)?.blockId;
      const study = await read(`/builds/${other}/blocks/${id}/steps?reference=${reference}`);
      return stepStudy.parse(study.body).advice.join(" ");
    };
    expect(await adviceOf("dropped", 1)).toMatch(/^The complex step lost its imaginary part in one entry/);
    expect(await adviceOf("dropped", 0)).toMatch(/resolve every entry at 10⁻⁶\.$/);
    expect(await adviceOf("off", 0)).toMatch(
      /every entry at 10⁻⁶\. The references of this block conflict in one entry/,
    );
  });
});
