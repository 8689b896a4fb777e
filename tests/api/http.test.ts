import { once } from "node:events";
import { request } from "node:http";
import type { IncomingMessage } from "node:http";
import type { AddressInfo } from "node:net";
import { gzipSync } from "node:zlib";
import express from "express";
import supertest from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { z } from "zod";
import { problem } from "../../shared/schemas/common.ts";
import type { Context } from "../../server/context.ts";
import { defineRoute } from "../../server/http/defineRoute.ts";
import type { Route } from "../../server/http/defineRoute.ts";
import { mountRoutes } from "../../server/http/mountRoutes.ts";
import { problemHandler } from "../../server/http/problemHandler.ts";
import { raw } from "../../server/http/rawBody.ts";
import { reply } from "../../server/http/reply.ts";
import { requestLog } from "../../server/http/requestLog.ts";
import { startTestServer } from "../support/server.ts";
import type { TestServer } from "../support/server.ts";

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.close());

/** An application of these routes alone. */
function appOf(routes: readonly Route[], config: Partial<Context["config"]> = {}) {
  const context = { ...server.context, config: { ...server.context.config, ...config } };
  const app = express();
  app.use(requestLog(context.logger), mountRoutes(context, routes), problemHandler(context.logger));
  return supertest(app);
}

const open = { tag: "Test", auth: "anyone", can: null, summary: "For a test" } as const;
const echo = defineRoute({
  ...open,
  method: "post",
  path: "/echo",
  body: z.strictObject({ "a/b": z.array(z.number()).optional(), "~": z.string().optional() }),
  response: z.unknown(),
  handler: ({ body }) => Promise.resolve(body),
});
const sizes = defineRoute({
  ...open,
  method: "post",
  path: "/sizes",
  body: raw({ describedBy: z.object({}) }),
  response: z.object({ bytes: z.number(), encoding: z.string() }),
  handler: ({ body }) => Promise.resolve({ bytes: body.bytes.length, encoding: body.encoding }),
});

describe("bodies", () => {
  const post = (body: string, type = "application/json") =>
    appOf([echo]).post("/echo").set("Content-Type", type).send(body);

  it("that are not JSON are answered with line and column", async () => {
    const response = await post('{\n  "a/b": [1, NaN]\n}');
    expect(response.status).toBe(400);
    const body = problem.parse(response.body);
    expect(body).toMatchObject({ type: "/problems/malformed-request", status: 400 });
    expect(body.detail).toMatch(/line 2, column 14.*"NaN"/);
    expect((await post("")).status).toBe(400);
    expect((await post('"\xff"')).status).toBe(422);
  });

  it("that are JSON but not valid are pointed at by RFC 6901 pointers", async () => {
    const response = await post('{"a/b": [1, "x"], "~": 3, "other": 1}');
    expect(response.status).toBe(422);
    expect((response.body.errors as { pointer: string }[]).map((e) => e.pointer)).toEqual([
      "#/a~1b/1",
      "#/~0",
      "#/other",
    ]);
  });

  it("list fifty places and count the rest", async () => {
    const response = await post(JSON.stringify({ "a/b": Array.from({ length: 70 }, () => "x") }));
    expect(response.body.errors).toHaveLength(50);
    expect(response.body.moreErrors).toBe(20);
  });

  it("of another kind are refused", async () => {
    for (const type of ["text/plain", "application/json; charset=latin1", "application/jsonx"]) {
      expect((await post("{}", type)).status, type).toBe(415);
    }
    expect((await post("{}", "application/json; charset=UTF-8")).status).toBe(200);
    expect((await appOf([echo]).post("/echo")).status).toBe(415);
  });

  it("that are too large are refused with the limit in numbers", async () => {
    const response = await post(JSON.stringify({ "~": "x".repeat(1024 * 1024) }));
    expect(response.status).toBe(413);
    expect(response.body.detail).toContain("1048576");
  });

  it("that a handler decodes itself come as they were sent", async () => {
    const send = (body: Buffer, headers: Record<string, string>) =>
      appOf([sizes], { limits: { ...server.context.config.limits, wireBytes: 1000 } })
        .post("/sizes")
        .set({ "Content-Type": "application/json", ...headers })
        .serialize((given: unknown) => given as string)
        .send(body as never);
    const zipped = gzipSync(Buffer.alloc(5000, 32));
    const gzip = await send(zipped, { "Content-Encoding": "gzip" });
    expect(gzip.body).toEqual({ bytes: zipped.length, encoding: "gzip" });
    expect((await send(Buffer.from("not json"), {})).body).toEqual({ bytes: 8, encoding: "identity" });
    const brotli = await send(Buffer.from("x"), { "Content-Encoding": "br" });
    expect(brotli.status).toBe(415);
    expect(brotli.headers["accept-encoding"]).toContain("gzip");
    expect((await send(Buffer.alloc(1001), {})).status).toBe(413);
    expect((await send(Buffer.from("{}"), { "Content-Type": "text/plain" })).status).toBe(415);
  });
});

it("a body that tells no length is refused as soon as it is too large, and the refusal arrives", async () => {
  const limits = { ...server.context.config.limits, wireBytes: 100_000 };
  const context = { ...server.context, config: { ...server.context.config, limits } };
  const app = express();
  app.use(requestLog(context.logger), mountRoutes(context, [sizes]), problemHandler(context.logger));
  const listening = app.listen(0, "127.0.0.1");
  await once(listening, "listening");
  const { port } = listening.address() as AddressInfo;
  const sending = request({
    port,
    host: "127.0.0.1",
    method: "POST",
    path: "/sizes",
    headers: { "Content-Type": "application/json" },
  });
  for (let i = 0; i < 400; i++) sending.write(Buffer.alloc(50_000, 32));
  sending.end();
  const sent = once(sending, "finish");
  const [response] = (await once(sending, "response")) as [IncomingMessage];
  expect(response.statusCode).toBe(413);
  response.resume();
  await once(response, "end");
  // The rest is let in and thrown away: a client that sends on to the end sees the answer, not a reset connection.
  await sent;
  listening.closeAllConnections();
  listening.close();
});

describe("mistakes of ours", () => {
  const failing = (fail: (context: Context) => Promise<unknown>) =>
    defineRoute({
      ...open,
      method: "get",
      path: "/fail",
      response: z.unknown(),
      handler: ({ context }) => fail(context),
    });

  it("are told without stack, SQL or path", async () => {
    const failures = [
      () => Promise.reject(new Error("at /home/somebody/secret.ts")),
      (context: Context) => context.db.select("SELECT secret FROM nowhere"),
    ];
    for (const fail of failures) {
      const response = await appOf([failing(fail)]).get("/fail");
      expect(response.status).toBe(500);
      expect(problem.parse(response.body)).toMatchObject({ type: "/problems/internal" });
      expect(response.text).not.toMatch(/SELECT|nowhere|secret|\.ts|\n\s+at /);
      expect(response.text).toContain(response.headers["x-request-id"] as string);
    }
  });

  it("include answers that the schema does not know", async () => {
    const leaking = defineRoute({
      ...open,
      method: "get",
      path: "/leak",
      response: z.object({ name: z.string() }),
      handler: () => Promise.resolve({ name: "x", passwordHash: "y" }),
    });
    expect((await appOf([leaking]).get("/leak")).status).toBe(500);
    const other = defineRoute({
      ...open,
      method: "get",
      path: "/other",
      response: z.object({ name: z.string() }),
      responses: { 202: { description: "Later", schema: z.object({ later: z.boolean() }) } },
      handler: () => Promise.resolve(reply(202, { later: true }, { Location: "/there" })),
    });
    const later = await appOf([other]).get("/other");
    expect(later.status).toBe(202);
    expect(later.headers.location).toBe("/there");
  });
});

describe("addresses", () => {
  it("that do not exist, and methods that one does not take, are told apart", async () => {
    const missing = await server.guest().get("/api/v1/nothing");
    expect(missing.status).toBe(404);
    expect(problem.parse(missing.body).type).toBe("/problems/not-found");
    const wrong = await server.guest().put("/api/v1/session");
    expect(wrong.status).toBe(405);
    expect(wrong.headers.allow?.split(", ").toSorted()).toEqual(["DELETE", "GET", "POST"]);
    expect((await server.guest().get("/api/v1/projects/%E0%A4%A")).status).toBeLessThan(500);
  });

  it("take parameters of the query that they know, once each", async () => {
    await server.seedPerson("asker@example.org");
    const agent = await server.agent("asker@example.org");
    for (const [query, pointer] of [
      ["limit=0", "#/query/limit"],
      ["limit=501", "#/query/limit"],
      ["limit=", "#/query/limit"],
      ["limit=1&limit=2", "#/query/limit"],
      ["page=2", "#/query/page"],
      ["cursor=abc", "#/query/cursor"],
    ]) {
      const response = await agent.get(`/api/v1/projects?${query}`);
      expect(response.status, query).toBe(422);
      expect(response.body.errors[0].pointer, query).toBe(pointer);
    }
  });
});

describe("requests", () => {
  it("keep an id that somebody gave them, if it is a sane one", async () => {
    const get = (id: string) => server.guest().get("/api/v1/nothing").set("X-Request-Id", id);
    const kept = await get("ci-run.4711-abc");
    expect(kept.headers["x-request-id"]).toBe("ci-run.4711-abc");
    expect(kept.body.instance).toBe("ci-run.4711-abc");
    for (const id of ["short", "with space inside it", "x".repeat(65)]) {
      expect((await get(id)).headers["x-request-id"]).toMatch(/^[0-9a-f-]{36}$/);
    }
  });

  it("are counted, told how many are left, and refused when there are too many", async () => {
    const limited = appOf([echo], { requestsPerMinute: 2 });
    const send = () => limited.post("/echo").send({});
    const first = await send();
    expect(first.headers["ratelimit-policy"]).toMatch(/q=2/);
    await send();
    const refused = await send();
    expect(refused.status).toBe(429);
    expect(Number(refused.headers["retry-after"])).toBeGreaterThan(0);
    expect(problem.parse(refused.body).type).toBe("/problems/too-many-requests");
  });
});
