import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { blockRow, historyItem } from "../../shared/schemas/block.ts";
import { buildRow } from "../../shared/schemas/build.ts";
import { strip } from "../../shared/schemas/commit.ts";
import { page } from "../../shared/schemas/common.ts";
import { overview, projectRow } from "../../shared/schemas/project.ts";
import { TENSION, THRUST, blockOf, buildOf, commitOf, post, postStory, shaOf } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

let server: TestServer;
let hull: SeededProject;
let builds: Awaited<ReturnType<typeof postStory>>;
const read = (path: string, project = hull) =>
  server.guest().get(`/api/v1/projects/${project.slug}${path}`).set("Authorization", `Bearer ${project.tokens.read}`);

beforeAll(async () => {
  server = await startTestServer();
  hull = await server.seedProject("hull", { "eye@example.org": "viewer" });
  builds = await postStory(server, hull);
});
afterAll(() => server.close());

async function blockIdOf(model: string): Promise<string> {
  const { items } = page(blockRow).parse((await read(`/builds/${builds[4]}/blocks`)).body);
  return items.find((row) => row.model === model)?.blockId ?? "";
}

describe("the history of an entry", () => {
  const historyOf = async (model: string, row: number, column: number, query = "") =>
    page(historyItem).parse(
      (await read(`/blocks/${await blockIdOf(model)}/entries/${row}/${column}/history${query}`)).body,
    ).items;

  it("goes from build to build in commit order, with its events", async () => {
    const items = await historyOf("rotor.thrust", 0, 1);
    const right = THRUST[0]?.[1] ?? NaN;
    expect(
      items.map(({ commit, derivative, verdict, motion, event }) => [commit, derivative, verdict, motion, event]),
    ).toEqual([
      [shaOf(1), right, "agrees", null, null],
      [shaOf(4), -right, "disagrees", "derivative-only", "break"],
      [shaOf(5), -right, "disagrees", "still", null],
      [shaOf(7), -right, "disagrees", "still", null],
    ]);
    expect(items[1]).toMatchObject({
      buildId: builds[4],
      subject: "Commit 4",
      author: "Ada",
      reference: right,
      drift: null,
    });
    expect(items[1]?.error).toBeCloseTo(2, 12);
  });

  it("tells where it ended, and numbers that are none", async () => {
    const items = await historyOf("mooring.tension", 1, 1);
    expect(items.map((item) => item.event)).toEqual([null, null, "break", "repair"]);
    expect(items[2]).toMatchObject({ derivative: "NaN", reference: TENSION[1]?.[1], error: null, verdict: "invalid" });
  });

  it("has no part in its neighbours' breaks", async () => {
    const items = await historyOf("rotor.thrust", 0, 0);
    expect(items.map((item) => [item.verdict, item.event])).toEqual(Array(4).fill(["agrees", null]));
  });

  it("keeps to the newest builds asked for, to a branch, and to the lane", async () => {
    expect((await historyOf("rotor.thrust", 0, 1, "?limit=2")).map((item) => item.commit)).toEqual([5, 7].map(shaOf));
    expect(await historyOf("rotor.thrust", 0, 1, "?branch=main")).toHaveLength(4);
    expect(await historyOf("rotor.thrust", 0, 1, "?branch=side")).toEqual([]);
    expect(await historyOf("rotor.thrust", 0, 1, "?lane=other")).toEqual([]);
    expect((await read("/blocks/999999/entries/0/0/history")).status).toBe(404);
  });
});

describe("the strip", () => {
  it("has every known commit in order, what its build says, and the suspects of open breaks", async () => {
    const answer = strip.parse((await read("/strip")).body);
    expect(answer.columns.map((column) => column.commit)).toEqual([1, 2, 3, 4, 5, 6, 7, 8].map(shaOf));
    expect(answer.columns.map((column) => column.verdict)).toEqual([
      "agrees",
      null,
      null,
      "disagrees",
      "invalid",
      null,
      "disagrees",
      null,
    ]);
    expect(answer.columns.map((column) => column.buildId)).toEqual([
      builds[1],
      null,
      null,
      builds[4],
      builds[5],
      null,
      builds[7],
      null,
    ]);
    expect(answer.columns[3]).toMatchObject({
      subject: "Commit 4",
      mainline: true,
      parents: [shaOf(3)],
      counts: { entries: 10, agrees: 7, disagrees: 3 },
      worst: { model: "rotor.thrust", output: "f", input: "x" },
    });
    expect(answer.columns[3]?.worstError).toBeCloseTo(2, 12);
    expect(answer.columns[4]?.worstError).toBeNull();
    expect(answer.brackets).toEqual([expect.objectContaining({ onset: shaOf(4) })]);
    expect(answer.brackets[0]?.suspects.toSorted()).toEqual([2, 3, 4].map(shaOf));
    expect(strip.parse((await read("/strip?lane=other")).body).brackets).toEqual([]);
  });

  it("puts a branch beside the line that it left", async () => {
    const rudder = await server.seedProject("rudder");
    const thrust = [blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST })];
    await post(server, rudder, buildOf(commitOf(1), thrust));
    await post(server, rudder, buildOf(commitOf(2, [1], "side"), thrust));
    await post(server, rudder, buildOf(commitOf(3, [1]), thrust));
    const { columns } = strip.parse((await read("/strip", rudder)).body);
    expect(columns.map(({ commit, mainline }) => [commit, mainline])).toEqual([
      [shaOf(1), true],
      [shaOf(3), true],
      [shaOf(2), false],
    ]);
    const side = page(buildRow).parse((await read("/builds?branch=side", rudder)).body);
    expect(side.items.map((row) => row.commit)).toEqual([shaOf(2)]);
  });
});

describe("the overview", () => {
  const at = async (n: number | null, project = hull) =>
    overview.parse((await read(`/summary${n === null ? "" : `?at=${shaOf(n)}`}`, project)).body);

  it("speaks of the newest judged commit of the default branch", async () => {
    const answer = await at(null);
    expect(answer).toMatchObject({
      commit: shaOf(7),
      buildId: builds[7],
      subject: "Commit 7",
      baseline: { commit: shaOf(5), buildId: builds[5] },
      counts: { blocks: 2, entries: 10, agrees: 7, disagrees: 3 },
      newBreaks: [],
      climbs: [],
      silentLanes: [],
      vanishedBlocks: [],
      checkedShare: 1,
    });
    expect(answer.repairedBreaks).toHaveLength(1);
    expect(answer.openBreaks.map((one) => one.sentence)).toEqual([
      "Three partials of rotor.thrust stopped agreeing here.",
    ]);
    expect(answer.models.map((row) => row.model)).toEqual(["rotor.thrust", "mooring.tension"]);
    expect(answer.models[0]).toMatchObject({
      counts: { blocks: 1, disagrees: 3 },
      checkedShare: 1,
      worst: { verdict: "disagrees" },
    });
    const shares = answer.resolutionCurve.map((point) => point.share);
    expect(shares).toEqual(shares.toSorted((a, b) => a - b));
    expect(shares.at(-1)).toBe(1);
  });

  it("says what happened at each commit, and sees the breaks as they were then", async () => {
    expect((await at(1)).sentence).toMatch(/10 partials agree/);
    const fourth = await at(4);
    expect(fourth.sentence).toMatch(/^Three partials of rotor\.thrust stopped agreeing/);
    expect(fourth.newBreaks).toEqual(fourth.openBreaks.map((one) => one.id));
    expect((await at(5)).openBreaks).toHaveLength(2);
    expect((await at(5)).sentence).toMatch(/mooring\.tension/);
    expect((await at(7)).sentence).toMatch(/One partial of mooring\.tension agrees again/);
    expect(await at(6)).toMatchObject({ counts: null, buildId: null, models: [] });
    expect((await read(`/summary?at=${shaOf(99)}`)).status).toBe(404);
  });

  it("names blocks that vanished", async () => {
    const bow = await server.seedProject("bow");
    const both = [
      blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST }),
      blockOf({ model: "mooring.tension", derivative: TENSION, reference: TENSION }),
    ];
    await post(server, bow, buildOf(commitOf(1), both));
    await post(server, bow, buildOf(commitOf(2), both.slice(0, 1)));
    const answer = await at(2, bow);
    expect(answer.vanishedBlocks).toEqual([
      expect.objectContaining({ model: "mooring.tension", output: "f", input: "x" }),
    ]);
    expect(answer.sentence).toMatch(/vanished/);
  });

  it("of a project without builds says so", async () => {
    const answer = await at(null, await server.seedProject("empty"));
    expect(answer).toMatchObject({ commit: null, counts: null, models: [], resolutionCurve: [], checkedShare: null });
  });

  it("tells which lanes fell silent, and what to build there", async () => {
    const mast = await server.seedProject("mast");
    const thrust = [blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST })];
    for (const n of [1, 2, 3, 4]) {
      const finishedAt = commitOf(n).committedAt;
      await post(server, mast, buildOf(commitOf(n), thrust, { lane: "gcc", run: { finishedAt } }));
      await post(server, mast, buildOf(commitOf(n), thrust, { lane: "clang" }));
    }
    await post(server, mast, buildOf(commitOf(5), thrust, { lane: "clang" }));
    const answer = overview.parse((await read("/summary?lane=clang", mast)).body);
    expect(answer.silentLanes).toEqual([{ lane: "gcc", lastBuildAt: commitOf(4).committedAt, commitsSince: 1 }]);
    const { items } = (await read("/wanted?lane=gcc", mast)).body as { items: unknown[] };
    expect(items).toEqual([
      { commit: shaOf(5), lane: "gcc", reason: "silent-lane", breakIds: [], remainingAfter: null },
    ]);
    await post(
      server,
      mast,
      buildOf(commitOf(5), thrust, { lane: "gcc", run: { finishedAt: commitOf(5).committedAt } }),
    );
    expect((await read("/wanted?lane=gcc", mast)).body).toEqual({ items: [] });
    const rows = await server.guest().get("/api/v1/projects").set("Authorization", `Bearer ${mast.tokens.read}`);
    expect(page(projectRow).parse(rows.body).items[0]?.silentLanes).toEqual(["gcc"]);
  });
});

describe("the list of projects", () => {
  it("says where there is trouble", async () => {
    const viewer = await server.agent("eye@example.org");
    const [row] = page(projectRow).parse((await viewer.get("/api/v1/projects")).body).items;
    expect(row).toMatchObject({ slug: "hull", role: "viewer", lanes: ["default"], openBreaks: 1, silentLanes: [] });
    expect(row?.lastBuildAt).not.toBeNull();
    expect(row?.trace.map(({ commit, verdict }) => [commit, verdict])).toEqual([
      [shaOf(1), "agrees"],
      [shaOf(4), "disagrees"],
      [shaOf(5), "invalid"],
      [shaOf(7), "disagrees"],
    ]);
  });
});
