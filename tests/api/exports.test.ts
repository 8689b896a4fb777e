import { createServer, get } from "node:http";
import type { IncomingMessage } from "node:http";
import type { AddressInfo } from "node:net";
import { setImmediate } from "node:timers/promises";
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from "vitest";
import type { MockInstance } from "vitest";
import type { BlockRow } from "../../shared/schemas/block.ts";
import { CAUTION } from "../../shared/domain/vocabulary.ts";
import { exportDocument } from "../../shared/schemas/export.ts";
import type { ExportDocument } from "../../shared/schemas/export.ts";
import { blockOf, BROKEN, buildOf, commitOf, numbers, post, postStory, shaOf } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";
import { parseTable } from "../unit/exports/parseCsv.ts";

let server: TestServer;
let hull: SeededProject;
let builds: Awaited<ReturnType<typeof postStory>>;
beforeAll(async () => {
  server = await startTestServer();
  hull = await server.seedProject("hull", { "dev@example.org": "developer", "lead@example.org": "lead" });
  builds = await postStory(server, hull);
  await postStory(server, hull, "clang-debug");
});
afterAll(() => server.close());
afterEach(() => vi.restoreAllMocks());

const read = (path: string, project = hull) =>
  server.guest().get(`/api/v1/projects/${project.slug}${path}`).set("Authorization", `Bearer ${project.tokens.read}`);

async function json(query = "", project = hull): Promise<ExportDocument> {
  const response = await read(`/export${query}`, project);
  expect(response.status).toBe(200);
  expect(response.headers["content-type"]).toMatch(/^application\/json/);
  expect(exportDocument.parse(response.body)).toEqual(response.body);
  return response.body as ExportDocument;
}

async function table(query: string, project = hull): Promise<Record<string, string>[]> {
  const response = await read(`/export?format=csv${query}`, project);
  expect(response.status).toBe(200);
  return parseTable(response.text);
}

const blocksOf = async (build: string) => (await read(`/builds/${build}/blocks`)).body.items as BlockRow[];
const numberOrNull = (text: string) => (text === "" ? null : Number(text));

describe("the record as JSON", () => {
  it("has a row for each block of each build, oldest commit first, as the API tells them", async () => {
    const { builds: rows = [], ...rest } = await json("?lane=default");
    expect(rest).toMatchObject({ format: "clinograph.export/1", project: "hull", lane: "default", caution: CAUTION });
    expect(rows.map((row) => [row.commit, row.model])).toEqual(
      [1, 4, 5, 7].flatMap((n) => [
        [shaOf(n), "rotor.thrust"],
        [shaOf(n), "mooring.tension"],
      ]),
    );
    for (const n of [1, 4, 5, 7] as const) {
      const told = await blocksOf(builds[n]);
      for (const row of rows.filter(({ buildId }) => buildId === builds[n])) {
        const { counts, worst, rtol, floor, resolution, motion } = told.find(({ model }) => model === row.model)!;
        expect(row).toMatchObject({ counts, worst, rtol, floor, resolution, motion, speaks: true, probe: null });
      }
    }
  });

  it("names the breaks that are bad at a commit", async () => {
    const { builds: rows = [], breaks = [] } = await json("?lane=default");
    const open = breaks.find(({ state }) => state === "open")!;
    const repaired = breaks.find(({ state }) => state === "repaired")!;
    expect(open).toMatchObject({ onset: shaOf(4), models: ["rotor.thrust"], entryCount: BROKEN.length });
    expect(repaired).toMatchObject({ onset: shaOf(5), repairedBy: shaOf(7), worstError: null });
    const numbersAt = (n: number, model: string) =>
      rows.find((row) => row.commit === shaOf(n) && row.model === model)?.breaks;
    expect([1, 4, 5, 7].map((n) => numbersAt(n, "rotor.thrust"))).toEqual([
      [],
      [open.number],
      [open.number],
      [open.number],
    ]);
    expect([4, 5, 7].map((n) => numbersAt(n, "mooring.tension"))).toEqual([[], [repaired.number], []]);
  });

  it("keeps to the times asked for, the end excluded, and to one lane", async () => {
    const times = async (query: string) => [...new Set((await json(query)).builds?.map((row) => row.commit))];
    // Commit n is of day n + 1 of January, at 9.
    expect(await times("?from=2026-01-05&to=2026-01-06")).toEqual([shaOf(4)]);
    expect(await times("?from=2026-01-05T09:00:00Z&to=2026-01-06T09:00:00Z")).toEqual([shaOf(4)]);
    expect(await times("?from=2026-01-05T09:00:00.001Z")).toEqual([shaOf(5), shaOf(7)]);
    expect(await times("?to=2026-01-05T10:00:00%2B01:00")).toEqual([shaOf(1)]);
    const { builds: rows = [], breaks = [] } = await json("?lane=clang-debug&from=2026-01-06");
    expect(new Set(rows.map((row) => row.lane))).toEqual(new Set(["clang-debug"]));
    expect(breaks.map((one) => one.onset)).toEqual([shaOf(5)]);
  });

  it("has who accepted what, and what was said", async () => {
    const developer = await server.agent("dev@example.org");
    const lead = await server.agent("lead@example.org");
    const wish = {
      selector: { model: "rotor.*", lane: "def*" },
      reason: "=known",
      maxError: 3,
      expiresAt: "2099-01-01T00:00:00Z",
    };
    const { body: waiver } = await developer.post("/api/v1/projects/hull/waivers").send(wish).expect(201);
    await lead.post(`/api/v1/waivers/${waiver.id}/approve`).expect(200);
    const { breaks: before = [] } = await json("?kind=breaks");
    const open = before.find(({ lane, onset }) => lane === "default" && onset === shaOf(4))!;
    await developer.post(`/api/v1/projects/hull/breaks/${open.id}/comments`).send({ body: "seen" }).expect(201);
    const { breaks = [], waivers = [], baselines } = await json();
    expect(waivers).toEqual([
      expect.objectContaining({
        state: "approved",
        selector: wish.selector,
        reason: "=known",
        askedBy: "dev",
        decidedBy: "lead",
      }),
    ]);
    expect(breaks.find(({ id }) => id === open.id)).toMatchObject({
      state: "waived",
      comments: [{ author: "dev", body: "seen" }],
    });
    expect(baselines).toEqual([]);
    expect((await json("?kind=waivers&lane=clang-debug")).waivers).toEqual([]);
    expect(await table("&kind=waivers")).toEqual([expect.objectContaining({ reason: "'=known", maxError: "3" })]);
  });

  it("has the section asked for alone", async () => {
    const document = await json("?kind=breaks");
    expect(Object.keys(document)).not.toContain("builds");
    expect(document.breaks?.length).toBe(4);
  });
});

describe("the record as a table", () => {
  it("is an attachment of text/csv", async () => {
    const { headers } = await read("/export?format=csv");
    expect(headers["content-type"]).toBe("text/csv; charset=utf-8; header=present");
    expect(headers["content-disposition"]).toBe('attachment; filename="hull-builds.csv"');
    expect(headers["cache-control"]).toBe("no-store");
  });

  it("reads back to the numbers of the API, bit for bit", async () => {
    const rows = await table("&lane=default");
    expect(rows).toHaveLength(8);
    expect(rows[0].caution).toBe(CAUTION);
    for (const row of rows) {
      const block = (await blocksOf(row.buildId)).find(({ blockId }) => blockId === row.blockId)!;
      expect(Number(row.floor)).toBe(block.floor);
      expect(Number(row.rtol)).toBe(block.rtol);
      expect(numberOrNull(row.resolution)).toBe(block.resolution);
      expect(Number(row.disagrees)).toBe(block.counts.disagrees);
      for (const name of ["error", "derivative", "reference", "uncertainty"] as const) {
        const cell = row[`worst${name.charAt(0).toUpperCase()}${name.slice(1)}`];
        const told = block.worst?.[name] ?? null;
        expect(numberOrNull(cell)).toEqual(told === null ? null : Number(told));
      }
    }
    expect(rows.find((row) => row.invalid === "1")).toMatchObject({ worstDerivative: "NaN", worstVerdict: "invalid" });
    expect(rows.some((row) => row.worstDerivative.startsWith("-"))).toBe(true);
  });

  it("has the breaks, and only a header of nothing", async () => {
    expect((await table("&kind=breaks&lane=default")).map((row) => [row.number, row.onset])).toEqual([
      ["1", shaOf(4)],
      ["2", shaOf(5)],
    ]);
    expect((await read("/export?format=csv&kind=baselines")).text).toMatch(/^id,selector,[^\n]*caution\r\n$/);
  });
});

it("tells a probe by its name, beside the block that it probes", async () => {
  const keel = await server.seedProject("probed");
  const values = numbers(1, 1, 3);
  const probed = {
    ...blockOf({ model: "rotor.thrust", derivative: values, reference: values }),
    probes: [{ kind: "dot-product" as const, label: "seed 7", forward: 1.25, reverse: 1.5 }],
  };
  await post(server, keel, buildOf(commitOf(1), [probed]));
  expect((await table("", keel)).map((row) => [row.model, row.probe, row.disagrees])).toEqual([
    ["rotor.thrust", "", "0"],
    ["rotor.thrust", "dot-product: seed 7", "1"],
  ]);
});

it("tells verdicts that an earlier build's check is carried from", async () => {
  const keel = await server.seedProject("carried");
  const values = numbers(2, 1, 3);
  const full = blockOf({ model: "rotor.thrust", derivative: values, reference: values });
  await post(server, keel, buildOf(commitOf(1), [full]));
  await post(server, keel, buildOf(commitOf(2), [{ ...full, references: [] }]));
  const rows = await table("", keel);
  expect(rows.map((row) => [row.agrees, row.carried, row.oldest])).toEqual([
    ["2", "", ""],
    ["2", "2", "1"],
  ]);
});

describe("what is asked for", () => {
  it.each(["?from=yesterday", "?from=2026-01-02&to=2026-01-02", "?format=xml", "?kind=people", "?until=2026-01-01"])(
    "is refused where it is %s",
    async (query) => {
      const response = await read(`/export${query}`);
      expect(response.status).toBe(422);
      expect(response.headers["content-disposition"]).toBeUndefined();
    },
  );

  it("is documented with both content types", async () => {
    const { body } = await server.guest().get("/api/v1/openapi.json");
    const { content } = body.paths["/projects/{project}/export"].get.responses["200"];
    expect(Object.keys(content)).toEqual(["application/json", "text/csv"]);
  });

  it("is for whoever may read", async () => {
    expect((await server.guest().get("/api/v1/projects/hull/export")).status).toBe(401);
    const response = await server
      .guest()
      .get("/api/v1/projects/hull/export")
      .set("Authorization", `Bearer ${hull.tokens.post}`);
    expect(response.status).toBe(403);
  });
});

/** Resolves when what was asked of the database is answered and nothing more follows from it. */
async function quiet(select: MockInstance<TestServer["context"]["db"]["select"]>): Promise<void> {
  for (let asked = -1; asked !== select.mock.calls.length;) {
    asked = select.mock.calls.length;
    await Promise.allSettled(select.mock.results.map((result) => result.value as Promise<unknown>));
    await setImmediate();
  }
}

describe("a large record", () => {
  const BLOCKS = 100;
  const COPIES = 150;
  let keel: SeededProject;
  beforeAll(async () => {
    keel = await server.seedProject("keel");
    const values = numbers(1, 1, 3);
    const blocks = Array.from({ length: BLOCKS }, (_, at) =>
      blockOf({ model: `part.p${at}`, derivative: values, reference: values }),
    );
    await post(server, keel, buildOf(commitOf(1), blocks));
    // The same build again and again, as if its commits had followed each other.
    await server.context.db.write(async (w) => {
      const [first] = await w.select<{ id: number; commitId: number }>(
        "SELECT id, commitId FROM builds WHERE projectId = $1",
        [keel.project.id],
      );
      for (let copy = 0; copy < COPIES; copy++) {
        await w.run("INSERT INTO commits (projectId, sha, committedAt) VALUES ($1, $2, $3)", [
          keel.project.id,
          shaOf(1000 + copy),
          Date.UTC(2026, 1, 1) + copy,
        ]);
        await w.run(
          `INSERT INTO builds (projectId, laneId, commitId, runId, state, shardCount, createdAt, completedAt, summary)
           SELECT projectId, laneId, (SELECT MAX(id) FROM commits), runId, state, shardCount, createdAt, completedAt, summary
           FROM builds WHERE id = $1`,
          [first.id],
        );
        await w.run(
          `INSERT INTO build_blocks (buildId, blockId, snapshotId, detailsId)
           SELECT (SELECT MAX(id) FROM builds), blockId, snapshotId, detailsId FROM build_blocks WHERE buildId = $1`,
          [first.id],
        );
      }
    });
  });

  it("comes whole, every block of every build once", async () => {
    const rows = await table("", keel);
    expect(rows).toHaveLength(BLOCKS * (COPIES + 1));
    expect(new Set(rows.map((row) => `${row.buildId} ${row.blockId}`)).size).toBe(rows.length);
    const order = rows.map((row) => row.committedAt);
    expect(order).toEqual(order.toSorted());
    expect(new Set(rows.map((row) => row.worstDerivative))).toEqual(new Set([String(numbers(1, 1, 3)[0][0])]));
  });

  it("is read no further once the connection is closed", async () => {
    const select = vi.spyOn(server.context.db, "select");
    const pages = () => select.mock.calls.filter(([sql]) => sql.includes("bb.blockId > $2")).length;
    let closed = () => {};
    const gone = new Promise<void>((resolve) => (closed = resolve));
    const http = createServer((request, response) => {
      response.on("close", () => closed());
      server.app(request, response);
    });
    await new Promise<void>((resolve) => http.listen(0, "127.0.0.1", resolve));
    const { port } = http.address() as AddressInfo;
    const response = await new Promise<IncomingMessage>((resolve, reject) => {
      const headers = { authorization: `Bearer ${keel.tokens.read}` };
      get({ host: "127.0.0.1", port, path: "/api/v1/projects/keel/export", headers, agent: false }, resolve).on(
        "error",
        reject,
      );
    });
    for await (const chunk of response as AsyncIterable<Buffer>) if (chunk.includes('"commit"')) break;
    response.destroy();
    await gone;
    await new Promise<void>((resolve) => http.close(() => resolve()));
    await quiet(select);
    const read = pages();
    expect(read).toBeGreaterThan(0);
    expect(read).toBeLessThan(COPIES);
  });
});
