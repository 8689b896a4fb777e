import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { DEFAULT_GATE_POLICY } from "../../shared/domain/vocabulary.ts";
import { AuditEntry } from "../../server/db/models/AuditEntry.ts";
import { startTestServer } from "../support/server.ts";
import type { Agent, SeededProject, TestServer } from "../support/server.ts";

let server: TestServer;
let admin: Agent;
let lead: Agent;
let hull: SeededProject;
const api = (path: string) => `/api/v1${path}`;
beforeAll(async () => {
  server = await startTestServer();
  await server.seedPerson("admin@example.org", { admin: true });
  hull = await server.seedProject("hull", { "lead@example.org": "lead" });
  await server.seedProject("keel", { "other@example.org": "viewer" });
  admin = await server.agent("admin@example.org");
  lead = await server.agent("lead@example.org");
});
afterAll(() => server.close());

describe("projects", () => {
  it("are opened by an administrator, with the defaults", async () => {
    const made = await admin.post(api("/projects")).send({ slug: "rotor", name: "  Rotor  " });
    expect(made.status).toBe(201);
    expect(made.body).toMatchObject({
      slug: "rotor",
      name: "Rotor",
      defaultBranch: "main",
      commitUrl: null,
      lanes: [],
      role: null,
      policy: DEFAULT_GATE_POLICY,
      tolerances: DEFAULT_TOLERANCES,
      toleranceRules: [],
      checkLimit: 20,
    });
    const again = await admin.post(api("/projects")).send({ slug: "rotor", name: "Rotor" });
    expect(again.status).toBe(409);
    expect((await lead.post(api("/projects")).send({ slug: "mine", name: "Mine" })).status).toBe(403);
  });

  it("are listed to those who may know of them", async () => {
    const slugs = async (agent: Agent) =>
      ((await agent.get(api("/projects"))).body.items as { slug: string }[]).map((row) => row.slug);
    expect(await slugs(admin)).toEqual(["hull", "keel", "rotor"]);
    expect(await slugs(lead)).toEqual(["hull"]);
    const byToken = await server.guest().get(api("/projects")).set("Authorization", `Bearer ${hull.tokens.read}`);
    expect(byToken.body.items).toHaveLength(1);
  });

  it("change only where a change was named, and the change is on record", async () => {
    const first = await lead
      .patch(api("/projects/hull"))
      .send({ policy: { climb: "fail" }, tolerances: { rtol: 1e-4 } });
    expect(first.status).toBe(200);
    const second = await lead
      .patch(api("/projects/hull"))
      .send({ policy: { "no-build": "fail" }, commitUrl: "https://code.example.org/hull/{sha}" });
    expect(second.body.policy).toEqual({ ...DEFAULT_GATE_POLICY, climb: "fail", "no-build": "fail" });
    expect(second.body.tolerances).toEqual({ ...DEFAULT_TOLERANCES, rtol: 1e-4 });
    expect(second.body.commitUrl).toBe("https://code.example.org/hull/{sha}");
    const entry = await AuditEntry.findOne({ where: { action: "project.edit" }, order: [["id", "ASC"]] });
    expect(JSON.parse(entry?.detail ?? "")).toEqual({ policy: { climb: "fail" }, tolerances: { rtol: 1e-4 } });
    expect((await lead.patch(api("/projects/hull")).send({ commitUrl: null })).body.commitUrl).toBeNull();
  });

  it("refuse what they do not know, and point at it", async () => {
    const response = await lead.patch(api("/projects/hull")).send({ polcy: {}, tolerances: { rtol: -1 } });
    expect(response.status).toBe(422);
    expect(response.headers["content-type"]).toContain("application/problem+json");
    expect((response.body.errors as { pointer: string }[]).map((e) => e.pointer).toSorted()).toEqual([
      "#/polcy",
      "#/tolerances/rtol",
    ]);
  });
});

describe("tokens", () => {
  const tokens = api("/projects/hull/tokens");
  const use = (token: string, path = "/projects/hull") =>
    server.guest().get(api(path)).set("Authorization", `Bearer ${token}`);

  it("are told once, listed without their secret, and end at once when revoked", async () => {
    const made = await lead.post(tokens).send({ name: "night job", scopes: ["read", "read"] });
    expect(made.status).toBe(201);
    const { token, id } = made.body as { token: string; id: string };
    expect(token).toMatch(/^clg_[0-9A-Za-z]{36}$/);
    expect((await use(token)).status).toBe(200);
    await server.context.idle();
    const listed = await lead.get(tokens);
    expect(JSON.stringify(listed.body)).not.toContain(token);
    expect(listed.body.items[0]).toMatchObject({ id, name: "night job", scopes: ["read"], createdBy: "lead" });
    expect(token.startsWith(listed.body.items[0].prefix as string)).toBe(true);
    expect(listed.body.items[0].lastUsedAt).not.toBeNull();
    expect((await lead.delete(`${tokens}/${id}`)).status).toBe(204);
    const refused = await use(token);
    expect(refused.status).toBe(401);
    expect(refused.headers["www-authenticate"]).toContain('error="invalid_token"');
    expect((await lead.delete(`${tokens}/${id}`)).status).toBe(404);
  });

  it("expire", async () => {
    const past = await lead.post(tokens).send({ name: "old", scopes: ["read"], expiresAt: "2020-01-01T00:00:00Z" });
    expect(past.status).toBe(422);
    const soon = new Date(Date.now() + 60_000).toISOString();
    const made = await lead.post(tokens).send({ name: "short", scopes: ["read"], expiresAt: soon });
    expect((await use(made.body.token)).status).toBe(200);
    await server.context.db.write((w) => w.run("UPDATE tokens SET expiresAt = 1 WHERE id = $1", [made.body.id]));
    expect((await use(made.body.token)).status).toBe(401);
  });

  it("that are mistyped are refused without a look into the database", async () => {
    const typo = hull.tokens.read.slice(0, -1) + (hull.tokens.read.endsWith("a") ? "b" : "a");
    const response = await use(typo);
    expect(response.status).toBe(401);
    expect(response.body.detail).toContain("cut off");
    expect((await server.guest().get(api("/projects")).set("Authorization", "Basic abc")).status).toBe(401);
  });

  it("open their own project only, as far as their scopes go", async () => {
    expect((await use(hull.tokens.read, "/projects/keel")).status).toBe(404);
    const posting = await use(hull.tokens.post);
    expect(posting.status).toBe(403);
    expect(posting.body.detail).toContain("scopes");
  });

  it("make and revoke no tokens themselves", async () => {
    const response = await server
      .guest()
      .post(tokens)
      .set("Authorization", `Bearer ${hull.tokens.both}`)
      .send({ name: "child", scopes: ["post"] });
    expect(response.status).toBe(403);
  });
});

describe("waivers", () => {
  const waivers = api("/projects/hull/waivers");
  const wish = {
    selector: { model: "rotor.*", rows: [0, 1] },
    reason: "The old table is replaced in the spring.",
    maxError: 1e-3,
    expiresAt: "2099-01-01T00:00:00Z",
  };

  it("are asked for by a developer and hold once a lead approved them", async () => {
    await server.seedProject("spar", { "dev@example.org": "developer", "lead@example.org": "lead" });
    const dev = await server.agent("dev@example.org");
    const asked = await dev.post(api("/projects/spar/waivers")).send(wish);
    expect(asked.status).toBe(201);
    expect(asked.body).toMatchObject({ state: "asked", askedBy: "dev", abilities: { "waiver.decide": false } });
    const approve = (agent: Agent) => agent.post(api(`/waivers/${asked.body.id}/approve`));
    expect((await approve(dev)).status).toBe(403);
    expect((await approve(await server.agent("other@example.org"))).status).toBe(404);
    const leader = await server.agent("lead@example.org");
    const approved = await approve(leader);
    expect(approved.body).toMatchObject({ state: "approved", decidedBy: "lead", selector: wish.selector });
    const again = await approve(leader);
    expect(again.status).toBe(409);
    const ended = await leader.post(api(`/waivers/${asked.body.id}/end`));
    expect(ended.body.state).toBe("ended");
    const trail = await leader.get(api("/projects/spar/audit"));
    expect((trail.body.items as { action: string }[]).map((e) => e.action)).toEqual([
      "waiver.end",
      "waiver.approve",
      "waiver.ask",
    ]);
  });

  it("are listed newest first, by state", async () => {
    const first = await lead.post(waivers).send(wish);
    await lead.post(waivers).send({ ...wish, selector: { lane: "gcc" } });
    await lead.post(api(`/waivers/${first.body.id}/reject`));
    const asked = await lead.get(waivers).query({ state: "asked" });
    expect((asked.body.items as { selector: object }[]).map((w) => w.selector)).toEqual([{ lane: "gcc" }]);
    const all = await server.guest().get(waivers).set("Authorization", `Bearer ${hull.tokens.read}`);
    expect((all.body.items as { state: string }[]).map((w) => w.state)).toEqual(["asked", "rejected"]);
    expect((await lead.get(waivers).query({ state: "granted" })).status).toBe(422);
  });

  it("must name something, a bound, and an end to come", async () => {
    const nothing = await lead.post(waivers).send({ ...wish, selector: {} });
    expect(nothing.body.errors).toEqual([{ pointer: "#/selector", detail: "must name at least one field" }]);
    const past = await lead.post(waivers).send({ ...wish, expiresAt: "2001-01-01T00:00:00Z" });
    expect(past.body.errors[0].pointer).toBe("#/expiresAt");
    expect((await lead.post(waivers).send({ ...wish, maxError: 0 })).status).toBe(422);
  });
});
