import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { baseline } from "../../shared/schemas/baseline.ts";
import { climb } from "../../shared/schemas/climb.ts";
import type { ClimbRow } from "../../shared/schemas/climb.ts";
import { gate as gateSchema } from "../../shared/schemas/gate.ts";
import { overview } from "../../shared/schemas/project.ts";
import { climbingBlocks, withErrors } from "../support/drifting.ts";
import { buildOf, commitOf, post, shaOf, THRUST } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

let server: TestServer;
let project: SeededProject;
beforeEach(async () => {
  server = await startTestServer();
  project = await server.seedProject("hull", { "lead@example.org": "lead", "developer@example.org": "developer" });
});
afterEach(() => server.close());

const read = async (path: string) => {
  const response = await server
    .guest()
    .get(`/api/v1/projects/hull${path}`)
    .set("Authorization", `Bearer ${project.tokens.both}`);
  expect(response.status, JSON.stringify(response.body)).toBe(200);
  return response.body as { items: unknown[] };
};
const climbs = async (query: string): Promise<ClimbRow[]> =>
  (await read(`/climbs?${query}`)).items.map((item) => climb.parse(item));
const gateAt = async (n: number, base: number) =>
  gateSchema.parse(await read(`/gate?commit=${shaOf(n)}&base=${shaOf(base)}`));
const place = (sha: string) => Number.parseInt(sha, 16);

/** 45 builds; from the 26th on the error of row 1, column 0 rises by 0.1 decade a build. */
async function postClimb(): Promise<void> {
  for (const [at, block] of climbingBlocks(45, 25, 0.1).entries()) {
    await post(server, project, buildOf(commitOf(at + 1), [block]));
  }
}

describe("a climb", () => {
  it("is told with its onset, what may have caused it, at the gate and on the overview of its time", async () => {
    await postClimb();
    const [found, ...others] = await climbs("state=all");
    expect(others).toEqual([]);
    expect(found).toMatchObject({ kind: "climb", state: "open", model: "rotor.thrust", entryCount: 1, openCount: 1 });
    expect(found?.worst).toMatchObject({ output: "f", input: "x", row: 1, column: 0 });
    expect(found?.worst.decades).toBeGreaterThan(1.5);
    const toldBy = place(found?.toldBy.commit ?? "");
    const calm = place(found?.lastCalm?.commit ?? "");
    expect(place(found?.onset.commit ?? "")).toBe(calm + 1);
    expect(found?.suspects.map(({ commit }) => place(commit)).sort((a, b) => a - b)).toEqual(
      Array.from({ length: toldBy - calm }, (_, at) => calm + 1 + at),
    );
    expect(found?.suspects[0]?.why[0]).toMatch(/^the error rose by \d\.\d decades in its build$/);
    expect(found?.sentence).toMatch(/^One partial of rotor\.thrust has climbed \d\.\d decades over \w+ builds/);
    expect((await gateAt(toldBy, toldBy - 1)).reasons).toMatchObject([
      { code: "climb", severity: "warn", model: "rotor.thrust", row: 1, column: 0 },
    ]);
    expect((await gateAt(toldBy + 1, toldBy)).reasons).toEqual([]);
    expect(await climbs(`at=${shaOf(toldBy - 1)}`)).toEqual([]);
    const then = overview.parse(await read(`/summary?at=${shaOf(toldBy)}`));
    expect(then).toMatchObject({
      sentence: expect.stringContaining("has climbed"),
      climbs: [{ kind: "climb", toldBy: shaOf(toldBy) }],
    });
    expect(overview.parse(await read(`/summary?at=${shaOf(toldBy - 1)}`)).climbs).toEqual([]);
  });

  it("ends when a lead accepts a baseline, who is named with the reason", async () => {
    await postClimb();
    const lead = await server.agent("lead@example.org");
    const developer = await server.agent("developer@example.org");
    const wish = { selector: { model: "rotor.*", rows: [1] }, commit: shaOf(45), reason: "the looser solver is meant" };
    expect((await developer.post("/api/v1/projects/hull/baselines").send(wish)).status).toBe(403);
    const elsewhere = await lead.post("/api/v1/projects/hull/baselines").send({ ...wish, commit: shaOf(999) });
    expect(elsewhere.status).toBe(422);
    expect(elsewhere.body.errors[0].pointer).toBe("#/commit");
    const accepted = await lead.post("/api/v1/projects/hull/baselines").send(wish);
    expect(accepted.status).toBe(201);
    expect(baseline.parse(accepted.body)).toMatchObject({ commit: shaOf(45), reason: wish.reason });
    expect(await climbs("state=open")).toEqual([]);
    expect(await climbs("state=ended")).toMatchObject([
      { state: "ended", endedBy: { commit: shaOf(45) }, openCount: 0 },
    ]);
    expect(await climbs(`at=${shaOf(44)}`)).toMatchObject([{ state: "open" }]);
    const list = await read("/baselines");
    expect(list.items.map((item) => baseline.parse(item))).toMatchObject([{ reason: wish.reason }]);
    const audit = await lead.get("/api/v1/projects/hull/audit");
    expect(audit.body.items[0]).toMatchObject({ action: "baseline.accept", detail: wish });
    // What stays at the accepted level is no climb any more.
    for (let n = 46; n <= 60; n += 1) {
      const level = THRUST.map((row, r) => row.map((_value, c) => (r === 1 && c === 0 ? -6.9 : -9)));
      await post(server, project, buildOf(commitOf(n), [withErrors(level)]));
    }
    expect(await climbs("state=open")).toEqual([]);
  });

  it("is the same whether a baseline was accepted before its builds came or after", async () => {
    const early = new Set([1, 2, 3, 30, 38, 39]);
    const blocks = climbingBlocks(45, 25, 0.1);
    const send = async (n: number) => {
      const block = blocks[n - 1];
      if (block !== undefined) await post(server, project, buildOf(commitOf(n), [block]));
    };
    const accept = async () => {
      const lead = await server.agent("lead@example.org");
      const wish = { selector: { model: "rotor.thrust" }, commit: shaOf(38), reason: "accepted" };
      expect((await lead.post("/api/v1/projects/hull/baselines").send(wish)).status).toBe(201);
    };
    const told = async () =>
      (await climbs("state=all")).map(({ kind, onset, toldBy, endedBy, worst }) => ({
        kind,
        onset: onset.commit,
        toldBy: toldBy.commit,
        endedBy: endedBy?.commit,
        row: worst.row,
        decades: worst.decades,
      }));
    for (const n of early) await send(n);
    await accept();
    for (let n = 45; n >= 1; n -= 1) if (!early.has(n)) await send(n);
    const before = await told();
    expect(before).toMatchObject([{ kind: "climb", endedBy: shaOf(38) }]);
    await server.close();
    server = await startTestServer();
    project = await server.seedProject("hull", { "lead@example.org": "lead" });
    for (let n = 1; n <= 45; n += 1) await send(n);
    await accept();
    expect(await told()).toEqual(before);
  });
});

describe("a jump", () => {
  it("within the tolerance is told in the build that made it, with the commits since the build before", async () => {
    const level = (exponent: number) => withErrors(THRUST.map((row) => row.map(() => exponent)));
    for (let n = 1; n <= 8; n += 1) await post(server, project, buildOf(commitOf(n), [level(-10)]));
    const history = [9, 10].map((n) => commitOf(n));
    await post(server, project, buildOf(commitOf(11), [level(-7.5)], { history }));
    const [found] = await climbs("state=ended");
    expect(found).toMatchObject({
      kind: "jump",
      entryCount: 6,
      onset: { commit: shaOf(11) },
      sentence: "Six partials of rotor.thrust jumped 2.5 decades in one build, within the tolerance.",
    });
    expect(found?.suspects.map(({ commit }) => place(commit)).sort((a, b) => a - b)).toEqual([9, 10, 11]);
    expect(found?.suspects[0]?.why[0]).toBe("the error rose by 2.5 decades over the 3 commits around it");
    expect(found?.nextTest).toMatchObject({ commit: shaOf(10) });
    expect((await gateAt(11, 8)).reasons).toMatchObject([
      { code: "climb", message: expect.stringContaining("jumped by 2.5") },
    ]);
  });
});
