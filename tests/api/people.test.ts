import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { Invitation } from "../../server/db/models/Invitation.ts";
import { ensureAdministrator } from "../../server/features/invitations/firstAdministrator.ts";
import { User } from "../../server/db/models/User.ts";
import { startTestServer } from "../support/server.ts";
import type { Agent, SeededProject, TestServer } from "../support/server.ts";

const api = (path: string) => `/api/v1${path}`;
const secretOf = (link: string) => new URL(link).hash.slice(1);

describe("the first start", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.close());
  const setUp = (token: string) =>
    server
      .guest()
      .post(api("/set-up"))
      .send({ token, email: "Ada@Example.org", name: "Ada", password: "a long enough sentence" });

  it("gives a one-time link; the newest one alone works, once", async () => {
    const first = (await ensureAdministrator(server.context)) as string;
    const second = (await ensureAdministrator(server.context)) as string;
    expect(second).toMatch(/^http:\/\/clinograph\.example\/set-up#[\w-]{32}$/);
    expect((await setUp(secretOf(first))).status).toBe(404);
    const made = await setUp(secretOf(second));
    expect(made.status).toBe(201);
    expect(made.body.user).toMatchObject({ email: "ada@example.org", admin: true });
    expect((await setUp(secretOf(second))).status).toBe(404);
    expect(await ensureAdministrator(server.context)).toBeNull();
  });

  it("keeps only hashes of one-time secrets", async () => {
    for (const invitation of await Invitation.findAll()) expect(invitation.tokenHash).toHaveLength(32);
  });
});

it("makes the administrator that the settings name, once", async () => {
  const administrator = { email: "root@example.org", password: "another long sentence" };
  const server = await startTestServer({ administrator });
  try {
    expect(await ensureAdministrator(server.context)).toBeNull();
    expect(await ensureAdministrator(server.context)).toBeNull();
    const users = await User.findAll();
    expect(users.map((user) => [user.email, user.admin])).toEqual([["root@example.org", true]]);
    expect((await server.guest().post(api("/session")).send(administrator)).status).toBe(200);
  } finally {
    await server.close();
  }
});

describe("members", () => {
  let server: TestServer;
  let hull: SeededProject;
  let lead: Agent;
  const members = api("/projects/hull/members");
  const invite = (body: object) => lead.post(api("/projects/hull/invitations")).send(body);
  beforeAll(async () => {
    server = await startTestServer();
    hull = await server.seedProject("hull", { "lead@example.org": "lead", "vera@example.org": "viewer" });
    await server.seedProject("keel", { "lead@example.org": "lead" });
    await server.seedPerson("known@example.org");
    lead = await server.agent("lead@example.org");
  });
  afterAll(() => server.close());

  it("who are new get a link, set a password with it and are in", async () => {
    const invited = await invite({ email: "New@Example.org", role: "developer" });
    expect(invited.status).toBe(201);
    expect(invited.body.member).toMatchObject({
      role: "developer",
      person: { email: "new@example.org", pending: true },
    });
    const token = secretOf(invited.body.link);
    const short = await server
      .guest()
      .post(api("/invitations/accept"))
      .send({ token, name: "Nell", password: "short" });
    expect(short.status).toBe(422);
    expect(short.body.errors).toEqual([{ pointer: "#/password", detail: "must have at least 12 characters" }]);
    const accept = () =>
      server.guest().post(api("/invitations/accept")).send({ token, name: "Nell", password: "a long enough sentence" });
    const accepted = await accept();
    expect(accepted.status).toBe(201);
    const cookie = String(accepted.headers["set-cookie"]).split(";")[0] as string;
    const project = await server.guest().get(api("/projects/hull")).set("Cookie", cookie);
    expect(project.body).toMatchObject({ role: "developer", abilities: { "token.manage": false, "waiver.ask": true } });
    expect((await accept()).status).toBe(404);
  });

  it("who are known become members without a link, but not twice", async () => {
    const added = await invite({ email: "known@example.org", role: "viewer" });
    expect(added.body).toMatchObject({ link: null, member: { person: { pending: false } } });
    const again = await invite({ email: "KNOWN@example.org", role: "lead" });
    expect(again.status).toBe(409);
    expect(again.body.type).toBe("/problems/conflict");
  });

  it("are listed page by page, their roles changed, and removed", async () => {
    const first = await lead.get(`${members}?limit=2`);
    expect(first.body.items).toHaveLength(2);
    const second = await lead.get(members).query({ limit: 2, cursor: first.body.next });
    expect(second.body.next).toBeNull();
    const all = [...first.body.items, ...second.body.items] as { person: { id: string; email: string } }[];
    expect(all.map((m) => m.person.email)).toEqual([
      "lead@example.org",
      "vera@example.org",
      "new@example.org",
      "known@example.org",
    ]);
    const vera = all[1]?.person.id as string;
    const asVera = await server.agent("vera@example.org");
    expect((await asVera.get(api("/projects/hull/audit"))).status).toBe(403);
    expect((await lead.patch(`${members}/${vera}`).send({ role: "lead" })).body.role).toBe("lead");
    expect((await asVera.get(api("/projects/hull/audit"))).status).toBe(200);
    expect((await lead.delete(`${members}/${vera}`)).status).toBe(204);
    expect((await asVera.get(api("/projects/hull"))).status).toBe(404);
    expect((await lead.delete(`${members}/${vera}`)).status).toBe(404);
  });

  it("of another project are not reached through this one", async () => {
    const outsider = await server.seedPerson("outsider@example.org");
    expect((await lead.patch(`${members}/${outsider.id}`).send({ role: "lead" })).status).toBe(404);
  });

  it("lose the way in when the invitation is taken back", async () => {
    const invited = await invite({ email: "late@example.org", role: "viewer" });
    expect((await lead.delete(`${members}/${invited.body.member.person.id}`)).status).toBe(204);
    const token = secretOf(invited.body.link);
    const response = await server
      .guest()
      .post(api("/invitations/accept"))
      .send({ token, name: "Late", password: "a long enough sentence" });
    expect(response.status).toBe(404);
  });

  it("leave an audit trail, newest first, that only their project's leads read", async () => {
    const { items } = (await lead.get(api("/projects/hull/audit"))).body as {
      items: { action: string; target: string; actor: { name: string }; detail: object }[];
    };
    expect(items.map((entry) => entry.action)).toEqual([
      "member.remove",
      "member.add",
      "member.remove",
      "member.role",
      "member.add",
      "person.accept",
      "member.add",
    ]);
    expect(items[3]).toMatchObject({ target: "vera@example.org", detail: { from: "viewer", to: "lead" } });
    expect((await lead.get(api("/projects/keel/audit"))).body.items).toEqual([]);
    expect(hull.project.slug).toBe("hull");
  });
});

describe("an administrator", () => {
  let server: TestServer;
  let admin: Agent;
  beforeAll(async () => {
    server = await startTestServer();
    await server.seedPerson("admin@example.org", { admin: true });
    await server.seedPerson("mona@example.org");
    admin = await server.agent("admin@example.org");
  });
  afterAll(() => server.close());

  it("closes an account, which ends its sessions, and opens it again", async () => {
    const { items } = (await admin.get(api("/people"))).body as { items: { id: string; email: string }[] };
    const mona = items.find((person) => person.email === "mona@example.org")?.id as string;
    const hers = await server.agent("mona@example.org");
    const closed = await admin.patch(api(`/people/${mona}`)).send({ disabled: true });
    expect(closed.body).toMatchObject({ disabled: true, admin: false });
    expect((await hers.get(api("/session"))).status).toBe(401);
    expect((await admin.post(api(`/people/${mona}/link`))).status).toBe(404);
    await admin.patch(api(`/people/${mona}`)).send({ disabled: false });
    expect((await hers.get(api("/session"))).status).toBe(401);
    expect((await (await server.agent("mona@example.org")).get(api("/session"))).status).toBe(200);
  });

  it("gives a link for a lost password", async () => {
    const mona = await User.findOne({ where: { email: "mona@example.org" }, rejectOnEmpty: true });
    const made = await admin.post(api(`/people/${mona.id}/link`));
    const body = { token: secretOf(made.body.link), name: "Mona", password: "a sentence she knows" };
    expect((await server.guest().post(api("/invitations/accept")).send(body)).status).toBe(201);
    const signedIn = await server
      .guest()
      .post(api("/session"))
      .send({ email: "mona@example.org", password: "a sentence she knows" });
    expect(signedIn.status).toBe(200);
  });

  it("cannot shut themselves out", async () => {
    const self = await User.findOne({ where: { email: "admin@example.org" }, rejectOnEmpty: true });
    expect((await admin.patch(api(`/people/${self.id}`)).send({ admin: false })).status).toBe(409);
  });
});
