import { afterEach, beforeEach, describe, expect, it } from "vitest";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import { blockDetail } from "../../shared/schemas/block.ts";
import { gate as gateSchema } from "../../shared/schemas/gate.ts";
import { overview } from "../../shared/schemas/project.ts";
import { blockOf, buildOf, commitOf, flipped, post, shaOf, THRUST } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

type Block = BuildDocument["blocks"][number];

let server: TestServer;
let project: SeededProject;
beforeEach(async () => {
  server = await startTestServer();
  project = await server.seedProject("hull", { "lead@example.org": "lead" });
});
afterEach(() => server.close());

/** rotor.thrust with a reference of these columns only; the rest of the document as ever. */
function checking(columns: readonly number[], derivative: readonly (readonly number[])[] = THRUST): Block {
  const block = blockOf({ model: "rotor.thrust", derivative, reference: THRUST });
  const values = THRUST.map((row) => columns.map((column) => row[column] ?? NaN));
  const references =
    columns.length === 0 ? [] : [{ method: "complex-step" as const, step: 1e-20, columns: [...columns], values }];
  return { ...block, references };
}

const read = async (path: string) => {
  const response = await server
    .guest()
    .get(`/api/v1/projects/hull${path}`)
    .set("Authorization", `Bearer ${project.tokens.both}`);
  expect(response.status, JSON.stringify(response.body)).toBe(200);
  return response.body as unknown;
};
const countsAt = async (n: number) => overview.parse(await read(`/summary?at=${shaOf(n)}`)).counts;
const gateAt = async (n: number, base: number) =>
  gateSchema.parse(await read(`/gate?commit=${shaOf(n)}&base=${shaOf(base)}`));
const build = (n: number, block: Block, parents?: number[]) =>
  post(server, project, buildOf(commitOf(n, parents), [block]));

describe("a job that posts the planned columns only", () => {
  it("keeps the verdicts of what it did not check, with their age, up to the project's limit", async () => {
    const lead = await server.agent("lead@example.org");
    expect((await lead.patch("/api/v1/projects/hull").send({ checkLimit: 2 })).body.checkLimit).toBe(2);
    await build(1, checking([0, 1]));
    const posted = await build(2, checking([0]));
    expect(await countsAt(2)).toMatchObject({ agrees: 6, unreferenced: 0, carried: 3 });
    expect((await gateAt(2, 1)).reasons).toEqual([]);
    const { items } = (await read(`/builds/${posted.build.id}/blocks`)) as {
      items: { blockId: string; carried: object }[];
    };
    expect(items[0]?.carried).toEqual({ entries: 3, oldest: 1 });
    const block = blockDetail.parse(await read(`/builds/${posted.build.id}/blocks/${items[0]?.blockId}`));
    expect(block.verdict).toEqual(Array.from({ length: 6 }, () => "agrees"));
    expect(block.age).toEqual([0, 1, 0, 1, 0, 1]);
    await build(3, checking([]));
    expect(await countsAt(3)).toMatchObject({ agrees: 6, carried: 6 });
    await build(4, checking([0]));
    expect(await countsAt(4)).toMatchObject({ agrees: 3, unreferenced: 3, carried: 0 });
    expect((await gateAt(4, 3)).reasons).toMatchObject([{ code: "reference-missing", severity: "warn" }]);
    const history = (await read(`/blocks/${items[0]?.blockId}/entries/0/1/history`)) as { items: object[] };
    expect(history.items).toMatchObject([
      { verdict: "agrees", age: 0 },
      { verdict: "agrees", age: 1 },
      { verdict: "agrees", age: 2 },
      { verdict: "unreferenced", age: null },
    ]);
  });

  it("does not acquit what it left out: a break that was found stays at the gate until it is checked again", async () => {
    const wrong = flipped(THRUST, [[1, 1]]);
    await build(1, checking([0, 1]));
    await build(2, checking([0, 1], wrong));
    await build(3, checking([0], wrong));
    expect(await countsAt(3)).toMatchObject({ agrees: 5, disagrees: 1, carried: 3 });
    expect(await gateAt(3, 1)).toMatchObject({
      decision: "fail",
      reasons: [{ code: "new-break", row: 1, column: 1, message: expect.stringContaining("as last checked") }],
    });
    expect((await gateAt(3, 2)).decision).toBe("pass");
  });

  it("does not vouch for a derivative that moved since it was checked", async () => {
    await build(1, checking([0, 1]));
    const moved = THRUST.map((row, r) => row.map((value, c) => (r === 2 && c === 1 ? value * 1.5 : value)));
    await build(2, checking([0], moved));
    expect(await countsAt(2)).toMatchObject({ agrees: 5, unresolved: 1, unreferenced: 0 });
  });

  it("is judged the same when an older build comes late, or the limit is set later", async () => {
    await build(1, checking([0, 1]));
    await build(3, checking([0]), [2]);
    expect(await countsAt(3)).toMatchObject({ agrees: 3, unreferenced: 3 });
    await build(2, checking([1]));
    expect(await countsAt(2)).toMatchObject({ agrees: 6, carried: 3 });
    expect(await countsAt(3)).toMatchObject({ agrees: 6, carried: 3 });
    await build(4, checking([]));
    const lead = await server.agent("lead@example.org");
    await lead.patch("/api/v1/projects/hull").send({ checkLimit: 1 });
    expect(await countsAt(4)).toMatchObject({ agrees: 3, unreferenced: 3, carried: 3 });
    await lead.patch("/api/v1/projects/hull").send({ checkLimit: 2 });
    expect(await countsAt(4)).toMatchObject({ agrees: 6, unreferenced: 0, carried: 6 });
  });
});
