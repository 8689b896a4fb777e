import { createServer } from "node:http";
import type { Server } from "node:http";
import type { AddressInfo } from "node:net";
import { Readable, Writable } from "node:stream";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { main } from "../../scripts/report/main.ts";
import { makeRepository } from "../unit/report/support/repository.ts";
import type { Repository } from "../unit/report/support/repository.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

let server: TestServer;
let http: Server;
let hull: SeededProject;
let repo: Repository;
let url: string;

beforeAll(async () => {
  server = await startTestServer();
  hull = await server.seedProject("hull");
  http = createServer(server.app);
  await new Promise<void>((resolve) => http.listen(0, "127.0.0.1", resolve));
  url = `http://127.0.0.1:${(http.address() as AddressInfo).port}`;
  repo = makeRepository();
});
afterAll(async () => {
  await new Promise((resolve) => http.close(resolve));
  await server.close();
  repo.dispose();
});

function sink(): { stream: Writable; text: () => string } {
  let text = "";
  const stream = new Writable({
    write: (chunk: Buffer, _, done) => {
      text += chunk.toString();
      done();
    },
  });
  return { stream, text: () => text };
}

/** The reporter against the real server, in this process. */
async function report(document: object, argv: readonly string[] = [], token = hull.tokens.both) {
  const [output, errors] = [sink(), sink()];
  const code = await main(["-", "--project", "hull", "--server", url, "--patience", "0", ...argv], {
    environment: { CLINOGRAPH_TOKEN: token },
    folder: repo.folder,
    input: Readable.from([JSON.stringify(document)]),
    output: output.stream,
    errors: errors.stream,
  });
  return { code, output: output.text(), errors: errors.text() };
}

/** Two partials of x^2 and y^3 at (2, 1); `scale` spoils the second. */
const block = (model: string, scale = 1) => ({
  model,
  output: { name: "lift", size: 1, values: [5] },
  input: { name: "trim", size: 2, values: [2, 1] },
  derivative: { method: "analytic", values: [[4, 3 * scale]] },
  references: [{ method: "ad-forward", values: [[4, 3]] }],
  sources: ["src/keel.f90"],
});

describe("the reporter and the server", () => {
  it("agree on a build, its break with the commit that began it, and its repair", async () => {
    repo.commit("Lay the keel", "src/keel.f90");
    const laid = await report({ blocks: [block("keel.lift")] });
    expect(laid).toMatchObject({ code: 0, errors: "" });
    expect(laid.output).toContain("1 block, 2 entries: 2 agree");

    const guilty = repo.commit("Trim the keel", "src/keel.f90", "trimmed");
    const trimmed = await report({ blocks: [block("keel.lift", 2)] });
    expect(trimmed.code).toBe(1);
    expect(trimmed.output).toContain(`break begun by ${guilty.slice(0, 12)} "Trim the keel"`);
    expect(trimmed.output).toMatch(/fail new-break: .*keel\.lift/);
    expect(trimmed.output).toContain("http://clinograph.example/projects/hull/breaks/");

    repo.commit("Trim the keel again", "src/keel.f90", "right");
    const repaired = await report({ blocks: [block("keel.lift")] });
    expect(repaired.code).toBe(0);
    expect(repaired.output).toContain(`repaired begun by ${guilty.slice(0, 12)}`);
  });

  it("count the same document once, outside of any CI", async () => {
    repo.commit("Paint the mast", "src/mast.f90");
    const document = { lane: "twice", blocks: [block("mast.lift")] };
    const [first, second] = [await report(document, ["--json"]), await report(document, ["--json"])];
    expect(first.code).toBe(0);
    expect(JSON.parse(second.output)).toEqual(JSON.parse(first.output));
    const another = await report({ lane: "twice", blocks: [block("mast.lift", 1 + 1e-15)] }, ["--json"]);
    const idOf = ({ output }: { output: string }) => (JSON.parse(output) as { build: { id: string } }).build.id;
    expect(idOf(another)).not.toBe(idOf(first));
  });

  it("complete a build in shards, for the one who waits and the one who comes last", async () => {
    repo.commit("Rig the sail", "src/sail.f90");
    const shared = ["--lane", "shards", "--run-id", "r1"];
    const early = await report({ blocks: [block("sail.lift")] }, [...shared, "--shard", "1/2"]);
    expect(early).toMatchObject({ code: 0, output: expect.stringContaining("the last shard") });
    const waiting = report({ blocks: [block("sail.lift")] }, [...shared, "--shard", "1/2", "--wait", "20"]);
    const last = await report({ blocks: [block("sail.drag")] }, [...shared, "--shard", "2/2"]);
    expect(last.output).toContain("2 blocks, 4 entries");
    expect(await waiting).toMatchObject({ code: 0, output: expect.stringContaining("gate passes") });
  });

  it("complete a build without its missing shards", async () => {
    const shared = ["--lane", "closed", "--run-id", "r2", "--shard", "1/3"];
    const closed = await report({ blocks: [block("sail.lift")] }, [...shared, "--close"]);
    expect(closed).toMatchObject({ code: 0, output: expect.stringContaining("1 block, 2 entries") });
  });

  it("keep nothing of a dry run", async () => {
    repo.commit("Try a new keel", "src/keel.f90", "tried");
    const tried = await report({ blocks: [block("keel.lift", 3)] }, ["--dry-run"]);
    expect(tried).toMatchObject({ code: 1, output: expect.stringContaining("a dry run: nothing was kept") });
    const answer = await server
      .guest()
      .get(`/api/v1/projects/hull/builds?commit=${repo.git("rev-parse", "HEAD")}`)
      .set("Authorization", `Bearer ${hull.tokens.both}`);
    expect((answer.body as { items: unknown[] }).items).toEqual([]);
  });

  it("say what is wrong with a document, and who may not post", async () => {
    const { derivative: _, ...incomplete } = block("keel.lift");
    const refused = await report({ blocks: [incomplete] });
    expect(refused).toMatchObject({ code: 2, errors: expect.stringContaining("#/blocks/0/derivative") });
    const conflict = [{ blocks: [block("keel.lift")] }, { blocks: [block("keel.lift", 2)] }];
    await report(conflict[0]!, ["--run-id", "same"]);
    expect(await report(conflict[1]!, ["--run-id", "same"])).toMatchObject({
      code: 2,
      errors: expect.stringContaining("409"),
    });
    expect(await report({ blocks: [] }, [], hull.tokens.read)).toMatchObject({ code: 2 });
    expect(await report({ blocks: [] }, [], "clg_nonsense")).toMatchObject({
      code: 2,
      errors: expect.stringContaining("CLINOGRAPH_TOKEN"),
    });
  });
});
