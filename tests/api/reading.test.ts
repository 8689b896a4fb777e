import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { blockDetail, blockRow } from "../../shared/schemas/block.ts";
import { buildDetail, buildRow } from "../../shared/schemas/build.ts";
import { strip } from "../../shared/schemas/commit.ts";
import { page } from "../../shared/schemas/common.ts";
import { MOTIONS, VERDICTS } from "../../shared/domain/vocabulary.ts";
import {
  BROKEN,
  THRUST,
  blockOf,
  buildOf,
  commitOf,
  flipped,
  numbers,
  post,
  postStory,
  shaOf,
} from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

let server: TestServer;
let hull: SeededProject;
let builds: Awaited<ReturnType<typeof postStory>>;
const read = (path: string, project = hull) =>
  server.guest().get(`/api/v1/projects/${project.slug}${path}`).set("Authorization", `Bearer ${project.tokens.read}`);

beforeAll(async () => {
  server = await startTestServer();
  hull = await server.seedProject("hull");
  builds = await postStory(server, hull);
});
afterAll(() => server.close());

const buildsOf = async (query: string, project = hull) =>
  page(buildRow).parse((await read(`/builds${query}`, project)).body);
const blocksOf = async (build: string, query = "") =>
  page(blockRow).parse((await read(`/builds/${build}/blocks${query}`)).body);
async function blockIdOf(model: string): Promise<string> {
  return (await blocksOf(builds[4])).items.find((row) => row.model === model)?.blockId ?? "";
}
const blockAt = async (build: string, model: string, query = "") =>
  blockDetail.parse((await read(`/builds/${build}/blocks/${await blockIdOf(model)}${query}`)).body);
const doubles = (plane: unknown) => {
  const bytes = Buffer.from(String(plane), "base64");
  return Array.from({ length: bytes.length / 8 }, (_, at) => bytes.readDoubleLE(8 * at));
};

describe("builds", () => {
  it("are listed newest first, by lane, branch and commit, in pages that miss none", async () => {
    const all = await buildsOf("");
    expect(all.items.map((row) => row.commit)).toEqual([7, 5, 4, 1].map(shaOf));
    expect((await buildsOf(`?commit=${shaOf(4)}`)).items.map((row) => row.id)).toEqual([builds[4]]);
    expect((await buildsOf("?lane=other")).items).toEqual([]);
    expect((await buildsOf("?branch=main")).items).toHaveLength(4);
    expect((await buildsOf("?branch=side")).items).toEqual([]);
    const first = await buildsOf("?limit=3");
    const second = await buildsOf(`?limit=3&cursor=${first.next ?? ""}`);
    expect([...first.items, ...second.items]).toEqual(all.items);
    expect(second.next).toBeNull();
    expect((await read("/builds?limit=0")).status).toBe(422);
    expect((await read("/builds?cursor=xyz")).status).toBe(422);
  });

  it("tell what they are compared with, what is in them and how they came", async () => {
    const response = await read(`/builds/${builds[4]}`);
    const build = buildDetail.parse(response.body);
    expect(build).toMatchObject({
      state: "complete",
      commit: shaOf(4),
      branch: "main",
      subject: "Commit 4",
      author: "Ada",
      current: true,
      shards: { expected: 1, received: [0], missing: [] },
      baseline: { buildId: builds[1], commit: shaOf(1) },
      summary: { blocks: 2, entries: 10, agrees: 7, disagrees: 3, unresolved: 0, unreferenced: 0, invalid: 0 },
    });
    expect(build.arrivals).toHaveLength(1);
    expect(build.worstError).toBeCloseTo(2, 12);
    expect((await read("/builds/999999")).status).toBe(404);
    expect((await read("/builds/x")).status).toBe(404);
  });

  it("say which shards are missing, and which run speaks for its commit", async () => {
    const keel = await server.seedProject("keel");
    const thrust = [blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST })];
    const sharded = { run: { id: "in shards" }, shard: { index: 1, count: 3 } };
    await post(server, keel, buildOf(commitOf(1), thrust, sharded));
    const [receiving] = (await buildsOf("", keel)).items;
    expect(receiving).toMatchObject({
      state: "receiving",
      current: false,
      completedAt: null,
      shards: { expected: 3, received: [1], missing: [0, 2] },
      summary: { blocks: 1, entries: 6 },
    });
    const column = strip.parse((await read("/strip", keel)).body).columns[0];
    expect(column).toMatchObject({ state: "receiving", counts: null, verdict: null });
    const first = await post(server, keel, buildOf(commitOf(1), thrust, { run: { id: "first" } }));
    const second = await post(server, keel, buildOf(commitOf(1), thrust, { run: { id: "second" } }));
    const current = (await buildsOf("", keel)).items.filter((row) => row.current).map((row) => row.id);
    expect(current).toEqual([second.build.id]);
    expect(first.build.id).not.toBe(second.build.id);
  });
});

describe("blocks of a build", () => {
  it("come worst first, in pages that miss none", async () => {
    const all = (await blocksOf(builds[5])).items;
    expect(all.map((row) => row.model)).toEqual(["mooring.tension", "rotor.thrust"]);
    expect(all[0]).toMatchObject({
      counts: { invalid: 1, agrees: 3 },
      worst: { row: 1, column: 1, derivative: "NaN" },
    });
    expect(all[1]).toMatchObject({
      rows: 3,
      columns: 2,
      output: { name: "f", size: 3, unit: "N", elements: null },
      counts: { entries: 6, agrees: 3, disagrees: 3 },
      motion: { still: 6, together: 0, "derivative-only": 0, "model-only": 0, apart: 0 },
    });
    const first = await blocksOf(builds[5], "?limit=1");
    const second = await blocksOf(builds[5], `?limit=1&cursor=${first.next ?? ""}`);
    expect([...first.items, ...second.items]).toEqual(all);
    expect(second.next).toBeNull();
    expect((await read("/builds/999999/blocks")).status).toBe(404);
  });

  it("tell no motion in the first build of a lane, and who moved in the next", async () => {
    expect((await blocksOf(builds[1])).items.map((row) => row.motion)).toEqual([null, null]);
    const thrust = (await blocksOf(builds[4])).items.find((row) => row.model === "rotor.thrust");
    expect(thrust?.motion).toMatchObject({ "derivative-only": 3, still: 3 });
  });

  it("open with all their numbers, as JSON", async () => {
    const block = await blockAt(builds[4], "rotor.thrust");
    expect(block.derivative).toEqual(flipped(THRUST, BROKEN).flat());
    expect(block.reference).toEqual(THRUST.flat());
    const bad = BROKEN.map(([row, column]) => row * 2 + column);
    expect(block.verdict).toEqual(THRUST.flat().map((_, at) => (bad.includes(at) ? "disagrees" : "agrees")));
    expect(block.motionPlane).toEqual(THRUST.flat().map((_, at) => (bad.includes(at) ? "derivative-only" : "still")));
    expect(block.source).toEqual([0, 0, 0, 0, 0, 0]);
    expect(block).toMatchObject({ commit: shaOf(4), lane: "default", format: "json", uncertaintyKind: "modelled" });
    expect(block.references).toEqual([
      expect.objectContaining({ index: 0, method: "complex-step", steps: [1e-20], columns: null, cost: null }),
    ]);
    const error = block.error as number[];
    bad.forEach((at) => expect(error[at]).toBeCloseTo(2, 12));
    for (const uncertainty of block.uncertainty as number[]) expect(uncertainty).toBeGreaterThan(0);
  });

  it("open in windows", async () => {
    const block = await blockAt(builds[4], "rotor.thrust", "?rows=1:3&columns=1:2");
    expect(block.window).toEqual({ rows: [1, 3], columns: [1, 2] });
    expect(block.reference).toEqual([THRUST[1]?.[1], THRUST[2]?.[1]]);
    expect(block.verdict).toEqual(["agrees", "disagrees"]);
    expect(block.motionPlane).toEqual(["still", "derivative-only"]);
    const path = `/builds/${builds[4]}/blocks/${await blockIdOf("rotor.thrust")}`;
    for (const query of ["rows=0:4", "rows=2:1", "columns=0:3", "rows=-1:2", "rows=1"]) {
      expect((await read(`${path}?${query}`)).status).toBe(422);
    }
  });

  it("open as base64 planes, with the same numbers, NaN among them", async () => {
    const json = await blockAt(builds[5], "mooring.tension");
    const planes = await blockAt(builds[5], "mooring.tension", "?format=f64le");
    const asNumber = (plane: unknown) =>
      (plane as (number | string | null)[]).map((v) => (v === null ? NaN : Number(v)));
    for (const name of ["derivative", "reference", "uncertainty", "error"] as const) {
      expect(doubles(planes[name])).toEqual(asNumber(json[name]));
    }
    expect(doubles(planes.derivative)[3]).toBeNaN();
    const codes = [...Buffer.from(String(planes.verdict), "base64")];
    expect(codes.map((code) => VERDICTS[code])).toEqual(json.verdict);
    const motions = [...Buffer.from(String(planes.motionPlane), "base64")];
    expect(motions.map((code) => MOTIONS[code])).toEqual(json.motionPlane);
  });

  it("larger than one tile open in windows across its tiles; too large for JSON they say what to do", async () => {
    const fin = await server.seedProject("fin");
    const large = numbers(510, 500, 3);
    const f64le = (values: number[][]) => ({
      f64le: Buffer.from(Float64Array.from(values.flat()).buffer).toString("base64"),
    });
    const document = buildOf(commitOf(1), [
      {
        model: "wake.deficit",
        output: { name: "f", size: 510 },
        input: { name: "x", size: 500 },
        derivative: { method: "ad-forward", values: f64le(large) },
        references: [{ method: "complex-step", values: f64le(large) }],
      },
    ]);
    const posted = await post(server, fin, document);
    const [row] = page(blockRow).parse((await read(`/builds/${posted.build.id}/blocks`, fin)).body).items;
    const path = `/builds/${posted.build.id}/blocks/${row?.blockId ?? ""}`;
    const whole = await read(path, fin);
    expect(whole.status).toBe(422);
    expect(JSON.stringify(whole.body)).toContain("f64le");
    const window = blockDetail.parse((await read(`${path}?rows=7:19&columns=90:94`, fin)).body);
    expect(window.derivative).toEqual(large.slice(7, 19).flatMap((values) => values.slice(90, 94)));
    const all = blockDetail.parse((await read(`${path}?format=f64le`, fin)).body);
    expect(all.reference).toBe(f64le(large).f64le);
  });

  it("show what each reference said, step by step, beside the chosen one", async () => {
    const tiller = await server.seedProject("tiller");
    const [coarse, fine] = [numbers(2, 2, 11), numbers(2, 2, 12)];
    const document = buildOf(commitOf(1), [
      {
        model: "wake.deficit",
        output: { name: "f", size: 2 },
        input: { name: "x", size: 3 },
        derivative: { method: "analytic", values: numbers(2, 3, 1) },
        references: [
          { method: "complex-step", values: numbers(2, 3, 1) },
          {
            method: "central-difference",
            columns: [2, 0],
            sweep: [
              { step: 1e-3, values: coarse },
              { step: 1e-4, values: fine },
            ],
          },
        ],
      },
    ]);
    const { build } = await post(server, tiller, document);
    const [row] = page(blockRow).parse((await read(`/builds/${build.id}/blocks`, tiller)).body).items;
    const path = `/builds/${build.id}/blocks/${row?.blockId ?? ""}`;
    const open = async (query: string) => blockDetail.parse((await read(`${path}?${query}`, tiller)).body).posted;
    expect(await open("format=json")).toBeUndefined();
    expect(await open("posted=0")).toEqual(numbers(2, 3, 1).flat());
    expect(await open("posted=1")).toEqual(coarse.flatMap(([two, zero]) => [zero, null, two]));
    expect(await open("posted=1&step=1")).toEqual(fine.flatMap(([two, zero]) => [zero, null, two]));
    expect(await open("posted=1&step=1&rows=1:2&columns=1:3")).toEqual([null, fine[1]?.[0]]);
    expect(doubles(await open("posted=1&format=f64le"))).toEqual(coarse.flatMap(([two, zero]) => [zero, NaN, two]));
    for (const query of ["posted=2", "posted=1&step=2", "posted=-1"]) {
      expect((await read(`${path}?${query}`, tiller)).status).toBe(422);
    }
  });

  it("are not found in another build's or project's place", async () => {
    const id = await blockIdOf("rotor.thrust");
    expect((await read(`/builds/999999/blocks/${id}`)).status).toBe(404);
    expect((await read(`/builds/${builds[4]}/blocks/999999`)).status).toBe(404);
    const other = await server.seedProject("stern");
    expect((await read(`/builds/${builds[4]}/blocks/${id}`, other)).status).toBe(404);
    expect((await read(`/builds/${builds[4]}`, other)).status).toBe(404);
  });
});
