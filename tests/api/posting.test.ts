import { gzipSync } from "node:zlib";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { Build } from "../../server/db/models/Build.ts";
import { buildRow, postedBuild } from "../../shared/schemas/build.ts";
import { postedCommits } from "../../shared/schemas/commit.ts";
import { problem } from "../../shared/schemas/common.ts";
import { blockOf, buildOf, commitOf, flipped, shaOf, THRUST } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

let server: TestServer;
let hull: SeededProject;
let keel: SeededProject;
let commits = 0;

beforeAll(async () => {
  server = await startTestServer();
  const limits = { ...server.context.config.limits, wireBytes: 20_000, entries: 100, blocks: 3, decodedBytes: 50_000 };
  Object.assign(server.context.config, { limits });
  hull = await server.seedProject("hull", { "dev@example.org": "developer", "viewer@example.org": "viewer" });
  keel = await server.seedProject("keel");
});
afterAll(() => server.close());
beforeEach(() => {
  commits += 1;
});

const thrust = blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST });
const document = (blocks = [thrust], wish: Parameters<typeof buildOf>[2] = {}) =>
  buildOf(commitOf(commits, []), blocks, wish);

interface Wish {
  readonly token?: string;
  readonly headers?: Record<string, string>;
  readonly query?: string;
  readonly path?: string;
}

function send(body: unknown, { token = hull.tokens.post, headers = {}, query = "", path = "hull/builds" }: Wish = {}) {
  const sent = typeof body === "string" || Buffer.isBuffer(body) ? body : JSON.stringify(body);
  const request = server.guest().post(`/api/v1/projects/${path}${query}`).set({ "Content-Type": "application/json" });
  if (token !== "") request.set("Authorization", `Bearer ${token}`);
  // Bytes go as they are: superagent would write a Buffer out as JSON.
  return request
    .set(headers)
    .serialize((given: unknown) => given as string)
    .send(sent as never);
}

type Answer = Awaited<ReturnType<typeof send>>;

/** The problem document of a refusal, after checking what all refusals have in common. */
function refusedWith(response: Answer, status: number, slug: string) {
  expect(response.status, response.text).toBe(status);
  expect(response.headers["content-type"]).toMatch(/^application\/problem\+json/);
  expect(response.text).not.toMatch(/SELECT|INSERT|sqlite|\/tmp|\.ts\b|\n\s+at /i);
  const told = problem.parse(response.body);
  expect(told).toMatchObject({ type: `/problems/${slug}`, status, instance: response.headers["x-request-id"] });
  return told;
}

describe("a posting", () => {
  it("is answered 201, again 200, compressed or not", async () => {
    const first = await send(document());
    expect(first.status, first.text).toBe(201);
    const { build, gate, summary } = postedBuild.parse(first.body);
    expect(build).toMatchObject({ state: "complete", lane: "default", commit: shaOf(commits) });
    expect(build.url).toMatch(/^http:\/\/clinograph\.example\//);
    expect(gate.decision).toBe("pass");
    expect(summary).toMatchObject({ blocks: 1, entries: 6, agrees: 6 });
    const zipped = gzipSync(JSON.stringify(document()));
    const again = await send(zipped, { headers: { "Content-Encoding": "gzip" } });
    expect(again.status, again.text).toBe(200);
    expect(again.body).toEqual(first.body);
    expect(await Build.count({ where: { id: Number(build.id) } })).toBe(1);
  });

  it("that is a dry run is answered 200 and kept nowhere", async () => {
    const before = await Build.count();
    const wrong = blockOf({ model: "rotor.thrust", derivative: flipped(THRUST, [[0, 0]]), reference: THRUST });
    const dry = await send(document([wrong]), { query: "?dryRun=1" });
    expect(dry.status, dry.text).toBe(200);
    expect(postedBuild.parse(dry.body)).toMatchObject({ gate: { decision: "fail" }, breaks: [{ state: "open" }] });
    expect(await Build.count()).toBe(before);
    expect((await server.guest().get(new URL(String(dry.body.build.url)).pathname)).status).not.toBe(500);
    refusedWith(await send(document(), { query: "?dryRun=yes" }), 422, "invalid");
    refusedWith(await send(document(), { query: "?dryrun=1" }), 422, "invalid");
  });

  it("that is to be judged later is answered 202 with the place to look", async () => {
    const response = await send(document(), { headers: { Prefer: "respond-async, wait=10" } });
    expect(response.status, response.text).toBe(202);
    expect(postedBuild.parse(response.body)).toMatchObject({
      build: { state: "receiving" },
      gate: { decision: "wait" },
    });
    expect(response.headers["preference-applied"]).toBe("respond-async");
    const location = String(response.headers.location);
    await server.context.idle();
    const polled = await server.guest().get(location).set("Authorization", `Bearer ${hull.tokens.read}`);
    expect(polled.status).toBe(200);
    expect(buildRow.parse(polled.body)).toMatchObject({ state: "complete", commit: shaOf(commits) });
  });

  it("may come from a developer who is signed in, with the header that shows it", async () => {
    const path = "/api/v1/projects/hull/builds";
    const developer = await server.agent("dev@example.org");
    expect((await developer.post(path).send(document())).status).toBe(201);
    const forged = await developer.post(path).set("X-CSRF-Token", "").send(document());
    refusedWith(forged, 403, "csrf-token");
    const viewer = await server.agent("viewer@example.org");
    refusedWith(await viewer.post(path).send(document()), 403, "not-allowed");
  });
});

describe("a posting that is refused", () => {
  it("for want of credentials is told how to show them", async () => {
    for (const token of ["", "clg_nobody", `${hull.tokens.post}x`]) {
      const response = await send(document(), { token });
      refusedWith(response, 401, "not-signed-in");
      expect(response.headers["www-authenticate"]).toMatch(/^Bearer realm=/);
    }
    const basic = await send(document(), { token: "", headers: { Authorization: "Basic Og==" } });
    refusedWith(basic, 401, "not-signed-in");
  });

  it("for the token's scope, or another project's token, keeps nothing", async () => {
    const before = await Build.count();
    refusedWith(await send(document(), { token: hull.tokens.read }), 403, "not-allowed");
    refusedWith(await send(document(), { token: keel.tokens.post }), 404, "not-found");
    refusedWith(await send(document(), { path: "nowhere/builds" }), 404, "not-found");
    expect(await Build.count()).toBe(before);
  });

  it("as no JSON is told line and column", async () => {
    const response = await send('{\n  "format": NaN\n}');
    expect(refusedWith(response, 400, "malformed-request").detail).toBe(
      'The body is not JSON: line 2, column 13: NaN is no JSON number; send it as the string "NaN".',
    );
    refusedWith(await send(""), 400, "malformed-request");
    const cut = gzipSync(JSON.stringify(document())).subarray(0, 60);
    refusedWith(await send(cut, { headers: { "Content-Encoding": "gzip" } }), 400, "malformed-request");
  });

  it("as too large is told which limit, in numbers", async () => {
    const large = blockOf({
      model: "large.block",
      derivative: Array.from({ length: 101 }, () => [1]),
      reference: Array.from({ length: 101 }, () => [1]),
    });
    const detail = async (body: unknown, headers = {}) =>
      refusedWith(await send(body, { headers }), 413, "too-large").detail;
    expect(await detail(document([large]))).toBe("The build has 101 entries, at most 100 are taken.");
    const four = ["a", "b", "c", "d"].map((model) => ({ ...thrust, model }));
    expect(await detail(document(four))).toBe("The build has 4 blocks, at most 3 are taken.");
    const bomb = gzipSync(Buffer.alloc(60_000, 32));
    expect(await detail(bomb, { "Content-Encoding": "gzip" })).toContain("50000 bytes");
  });

  it("in another form is told which are taken", async () => {
    const text = await send(document(), { headers: { "Content-Type": "text/plain" } });
    refusedWith(text, 415, "unsupported-media");
    const brotli = await send(document(), { headers: { "Content-Encoding": "br" } });
    refusedWith(brotli, 415, "unsupported-media");
    expect(brotli.headers["accept-encoding"]).toBe("gzip, identity");
  });

  it("as no valid document is told every place", async () => {
    const spoilt = { ...document([{ ...thrust, derivative: { method: "analytic", values: [[1]] } }]), colour: "red" };
    const told = refusedWith(await send(spoilt), 422, "invalid");
    expect(told.errors).toEqual([{ pointer: "#/colour", detail: "is not a property of the format" }]);
    const numbers = refusedWith(await send({ ...spoilt, colour: undefined }), 422, "invalid");
    expect(numbers.errors).toEqual([{ pointer: "#/blocks/0/derivative/values", detail: "has 1 rows, expected 3" }]);
    const twice = refusedWith(await send(document([thrust, thrust])), 422, "invalid");
    expect(twice.errors?.[0]?.pointer).toBe("#/blocks/1");
    const many = { ...document([]), ...Object.fromEntries(Array.from({ length: 60 }, (_, at) => [`x${at}`, 1])) };
    const long = refusedWith(await send(many), 422, "invalid");
    expect(long.errors).toHaveLength(50);
    expect(long.moreErrors).toBe(10);
  });

  it("for what was posted before is a conflict", async () => {
    await send(document());
    const other = refusedWith(await send(document([{ ...thrust, point: "stall" }])), 409, "conflict");
    expect(other.detail).toContain("run.id");
    const parents = buildOf(commitOf(commits, [999]), [thrust], { run: { id: "p" } });
    expect((await send(parents)).status).toBe(201);
    const others = buildOf(commitOf(commits, [998]), [thrust], { run: { id: "q" } });
    refusedWith(await send(others), 409, "conflict");
    const circle = refusedWith(
      await send(
        buildOf(commitOf(commits, [999]), [thrust], { run: { id: "r" }, history: [commitOf(999, [commits])] }),
      ),
      422,
      "invalid",
    );
    expect(circle.errors).toHaveLength(1);
  });
});

describe("closing a build", () => {
  it("completes it, and is not for tokens that only read, nor for other projects", async () => {
    const shard = document([thrust], { shard: { index: 0, count: 2 } });
    const { id } = postedBuild.parse((await send(shard)).body).build;
    const close = (token: string, slug = "hull") => send("", { token, path: `${slug}/builds/${id}/close` });
    refusedWith(await close(hull.tokens.read), 403, "not-allowed");
    refusedWith(await close(keel.tokens.post, "keel"), 404, "not-found");
    const closed = await close(hull.tokens.post);
    expect(closed.status, closed.text).toBe(200);
    expect(postedBuild.parse(closed.body).build.state).toBe("complete");
    const late = await send(document([], { shard: { index: 1, count: 2 } }));
    expect(refusedWith(late, 409, "conflict").detail).toContain("closed without shard 1");
  });
});

describe("history alone", () => {
  it("is added, counted, and checked like that of a build", async () => {
    const tell = (commitsTold: unknown, token = hull.tokens.post) =>
      send({ commits: commitsTold }, { token, path: "hull/commits" });
    const told = await tell([commitOf(5001, []), commitOf(5002)]);
    expect(told.status, told.text).toBe(200);
    expect(postedCommits.parse(told.body).added).toBe(2);
    expect(postedCommits.parse((await tell([commitOf(5002)])).body).added).toBe(0);
    refusedWith(await tell([commitOf(5002, [5000])]), 409, "conflict");
    refusedWith(await tell([commitOf(5001, [5002])]), 422, "invalid");
    refusedWith(await tell([]), 422, "invalid");
    refusedWith(await tell([{ sha: "short" }]), 422, "invalid");
    refusedWith(await tell([commitOf(5003)], hull.tokens.read), 403, "not-allowed");
  });
});

it("a server that is being stopped takes nothing new, and says when to come again", async () => {
  const before = await Build.count();
  server.context.startDraining();
  const response = await send(document());
  refusedWith(response, 503, "draining");
  expect(Number(response.headers["retry-after"])).toBeGreaterThan(0);
  expect(await Build.count()).toBe(before);
});
