import { readFileSync, rmSync } from "node:fs";
import { dirname, join } from "node:path";
import { build } from "vite";
import { afterAll, afterEach, beforeAll, describe, expect, it } from "vitest";
import { fakeServer, posted } from "./support/fakeServer.ts";
import type { FakeServer, Received, Reply } from "./support/fakeServer.ts";
import { makeFolder, makeRepository } from "./support/repository.ts";
import type { Repository } from "./support/repository.ts";
import { runReporter } from "./support/runReporter.ts";
import type { Ended } from "./support/runReporter.ts";

/** The built reporter starts many times faster than its sources do; what it is built from runs once, below. */
let built: string;
let repo: Repository;
let first: string;
let head: string;
let server: FakeServer | null = null;

beforeAll(async () => {
  const folder = makeFolder();
  await build({ mode: "reporter", logLevel: "silent", build: { outDir: folder, emptyOutDir: false } });
  built = join(folder, "report.mjs");
  repo = makeRepository();
  first = repo.commit("Lay the keel", "src/keel.f90");
  head = repo.commit("Trim the keel", "src/keel.f90", "trimmed");
  repo.write("build.json", JSON.stringify({ lane: "gcc", blocks: [] }));
}, 60_000);
afterAll(() => {
  repo.dispose();
  rmSync(dirname(built), { recursive: true, force: true });
});
afterEach(() => server?.close());

const PATIENT = ["--patience", "20"];

/** Runs the reporter in the repository against a server that answers as told. */
async function report(
  argv: readonly string[],
  answer: (request: Received, at: number) => Reply,
  more: { readonly environment?: Record<string, string>; readonly input?: string; readonly folder?: string } = {},
): Promise<Ended & { received: readonly Received[] }> {
  server = await fakeServer(answer);
  const environment = { CLINOGRAPH_TOKEN: "clg_secret", CLINOGRAPH_URL: server.url, ...more.environment };
  const ended = await runReporter(["--project", "hull", ...argv], {
    folder: repo.folder,
    script: built,
    ...more,
    environment,
  });
  return { ...ended, received: server.received };
}

const good = (): Reply => ({ status: 201, body: posted({}) });
const failing = posted({
  gate: { decision: "fail", reasons: [{ code: "new-break", severity: "fail", message: "3 entries disagree" }] },
});
const warning = posted({
  gate: { reasons: [{ code: "resolution-lost", severity: "warn", message: "coarser than before" }] },
});

describe("the reporter as a process", { timeout: 60_000 }, () => {
  it("posts what git and the CI know, and ends with 0 where the gate passes", async () => {
    const environment = { GITLAB_CI: "1", CI_PIPELINE_ID: "41", CI_PIPELINE_URL: "https://ci.example/41" };
    const { code, output, errors, received } = await report(["build.json"], good, { environment });
    expect({ code, errors }).toEqual({ code: 0, errors: "" });
    expect(output).toContain("gate passes");
    const [{ method, url, headers, document }] = received as [Received];
    expect([method, url]).toEqual(["POST", "/api/v1/projects/hull/builds"]);
    expect(headers).toMatchObject({ authorization: "Bearer clg_secret", "content-type": "application/json" });
    expect(headers["content-encoding"]).toBe(undefined);
    expect(document).toMatchObject({
      format: "clinograph.build/1",
      commit: { sha: head, parents: [first], branch: "main", subject: "Trim the keel" },
      history: [{ sha: first, subject: "Lay the keel" }],
      lane: "gcc",
      run: { id: "gitlab-41", url: "https://ci.example/41" },
    });
  });

  it("reads standard input, and compresses what is long", async () => {
    const input = JSON.stringify({ blocks: Array(2000).fill({ model: "keel.lift" }) });
    const { code, received } = await report(["-", "--dry-run", "--json"], good, { input });
    expect(code).toBe(0);
    expect(received[0]).toMatchObject({ url: "/api/v1/projects/hull/builds?dryRun=1" });
    expect(received[0]!.headers["content-encoding"]).toBe("gzip");
    expect(received[0]!.document!.blocks).toHaveLength(2000);
  });

  it("prints the answer as it came for --json", async () => {
    const { output } = await report(["build.json", "--json"], good);
    expect(JSON.parse(output)).toEqual(posted({}));
  });

  it("ends with 1 where the gate fails, and with 0 where it only warns", async () => {
    const failed = await report(["build.json"], () => ({ status: 201, body: failing }));
    expect(failed.code).toBe(1);
    expect(failed.output).toContain("fail new-break: 3 entries disagree");
    await server!.close();
    const warned = await report(["build.json"], () => ({ status: 200, body: warning }));
    expect(warned.code).toBe(0);
    expect(warned.output).toContain("warn resolution-lost");
  });

  it.each([
    [400, {}, /400/],
    [401, {}, /CLINOGRAPH_TOKEN/],
    [403, {}, /scope/],
    [404, {}, /--project/],
    [409, {}, /run id/],
    [413, { detail: "The limit is 64 MiB." }, /64 MiB/],
    [
      422,
      { errors: [{ pointer: "#/blocks/0/model", detail: "is missing" }], moreErrors: 7 },
      /#\/blocks\/0\/model: is missing\n.*7 more/,
    ],
  ])("ends with 2 for an answer of %i, and says why", async (status, body, message) => {
    const { code, errors, received } = await report(["build.json"], () => ({ status, body }));
    expect(code).toBe(2);
    expect(errors).toMatch(message);
    expect(errors).not.toContain("clg_secret");
    expect(received).toHaveLength(1);
  });

  it("ends with 2 for wrong use, a file that is not there, and what is not JSON", async () => {
    expect((await report([], good)).code).toBe(2);
    await server!.close();
    expect(await report(["absent.json"], good)).toMatchObject({ code: 2, errors: expect.stringContaining("ENOENT") });
    await server!.close();
    const bad = await report(["-"], good, { input: '{"blocks": [NaN]}' });
    expect(bad).toMatchObject({ code: 2, errors: expect.stringContaining("as strings"), received: [] });
  });

  it("tries again while the server is busy, and posts the same bytes", async () => {
    const { code, errors, received } = await report(["build.json", ...PATIENT], (_, at) =>
      at < 2 ? { status: 503, headers: { "Retry-After": "0" } } : good(),
    );
    expect(code).toBe(0);
    expect(errors).toMatch(/503.*\n.*503/);
    expect(received).toHaveLength(3);
    expect(received[2]!.bytes.equals(received[0]!.bytes)).toBe(true);
  });

  it("ends with 3 when it could not post", async () => {
    const busy = await report(["build.json", "--patience", "0"], () => ({ status: 503 }));
    expect(busy).toMatchObject({ code: 3, errors: expect.stringContaining("Gave up after 1 attempts") });
    await server!.close();
    const gone = await report(["build.json", "--patience", "0"], good, {
      environment: { CLINOGRAPH_URL: "http://127.0.0.1:9" },
    });
    expect(gone).toMatchObject({ code: 3, received: [] });
  });

  it("ends with 3 where what answers is no Clinograph", async () => {
    const { code, errors } = await report(["build.json"], () => ({ status: 200, body: "<html>Welcome</html>" }));
    expect(code).toBe(3);
    expect(errors).toContain("check --server");
  });

  it("waits for the other shards, and then for the gate and its breaks", async () => {
    const receiving = posted({ build: { state: "receiving" }, gate: { decision: "wait" } });
    const reason = { code: "new-break", severity: "fail", message: "3 entries disagree", breakId: "5" } as const;
    const { gate } = posted({ gate: { decision: "fail", reasons: [reason, { ...reason, row: 1 }] } });
    const broken = { id: "5", url: "http://clinograph.example/breaks/5", state: "open", onset: { commit: first } };
    const row = (state: string) => ({ state, summary: receiving.summary, shards: { missing: [1] } });
    const { code, output, received } = await report(
      ["build.json", "--shard", "1/2", "--run-id", "r", "--wait"],
      (request, at) => {
        if (request.method === "POST") return { status: 201, body: receiving };
        if (request.url.includes("/gate?")) return { status: 200, body: gate };
        if (request.url.includes("/breaks/")) return { status: 200, body: broken };
        return { status: 200, body: row(at < 2 ? "receiving" : "complete") };
      },
    );
    expect(code).toBe(1);
    expect(output).toContain("gate FAILS");
    expect(output).toContain(`break begun by ${first.slice(0, 12)} "Lay the keel"`);
    const asked = received.map(({ url }) => url.replace(/\?.*/, "").split("/").pop());
    expect(asked).toEqual(["builds", "12", "12", "gate", "5"]);
    expect(received[0]!.document).toMatchObject({ shard: { index: 0, count: 2 }, run: { id: "r" } });
  });

  it("ends with 3 when the wait is over, and names the missing shards", async () => {
    const receiving = posted({ build: { state: "receiving" }, gate: { decision: "wait" } });
    const row = { state: "receiving", summary: receiving.summary, shards: { missing: [1, 3] } };
    const { code, errors } = await report(["build.json", "--wait", "0"], ({ method }) =>
      method === "POST" ? { status: 201, body: receiving } : { status: 200, body: row },
    );
    expect(code).toBe(3);
    expect(errors).toContain("Missing shards (from 1): 2, 4");
  });

  it("closes the build of this commit and run without its missing shards", async () => {
    const rows = [
      { id: "7", state: "receiving", run: { id: "another" } },
      { id: "8", state: "receiving", run: { id: "r" } },
    ];
    const { code, received } = await report(["--close", "--run-id", "r", "--lane", "gcc"], ({ method }) =>
      method === "POST" ? { status: 200, body: posted({}) } : { status: 200, body: { items: rows, next: null } },
    );
    expect(code).toBe(0);
    expect(received[0]!.url).toContain(`commit=${head}&lane=gcc`);
    expect(received[1]).toMatchObject({ method: "POST", url: "/api/v1/projects/hull/builds/8/close" });
  });

  it("does not follow a redirect with its token", async () => {
    const moved = () => ({ status: 308, headers: { Location: "https://elsewhere.example/" } });
    const { code, errors, received } = await report(["build.json"], moved);
    expect(code).toBe(2);
    expect(errors).toContain("https://elsewhere.example/");
    expect(received).toHaveLength(1);
  });

  it("works outside a repository with a document that tells its commit, and not without", async () => {
    const folder = makeFolder();
    try {
      const input = JSON.stringify({ commit: { sha: first }, blocks: [] });
      const told = await report(["-"], good, { folder, input });
      expect(told.code).toBe(0);
      expect(told.received[0]!.document).toMatchObject({ commit: { sha: first }, history: [] });
      await server!.close();
      const untold = await report(["-"], good, { folder, input: '{"blocks":[]}' });
      expect(untold).toMatchObject({ code: 2, errors: expect.stringContaining("Of which commit") });
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
});

describe("its sources", { timeout: 60_000 }, () => {
  it("run as they are", async () => {
    server = await fakeServer(good);
    const environment = { CLINOGRAPH_TOKEN: "clg_secret", CLINOGRAPH_URL: server.url };
    const ended = await runReporter(["build.json", "--project", "hull"], { folder: repo.folder, environment });
    expect(ended).toMatchObject({ code: 0, errors: "" });
    expect(server.received[0]!.document).toMatchObject({ commit: { sha: head } });
  });

  it("are built to one file that needs nothing beside it", () => {
    expect(readFileSync(built, "utf8").match(/^(?:import|export) .* from "(?!node:).*$/gm)).toBe(null);
  });
});
