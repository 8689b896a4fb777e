import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { session } from "../../shared/schemas/people.ts";
import { problem } from "../../shared/schemas/common.ts";
import { User } from "../../server/db/models/User.ts";
import { PASSWORD, startTestServer } from "../support/server.ts";
import type { TestServer } from "../support/server.ts";

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
  await server.seedPerson("ines@example.org", { name: "Ines" });
  await server.seedPerson("otto@example.org");
});
afterAll(() => server.close());

const cookieOf = (response: { headers: Record<string, unknown> }) => String(response.headers["set-cookie"] ?? "");

async function signIn(email: string, password = PASSWORD) {
  return server.guest().post("/api/v1/session").send({ email, password });
}

describe("signing in", () => {
  it("gives a cookie that scripts cannot read, and a CSRF token", async () => {
    const response = await signIn("INES@example.org").then((r) => r);
    expect(response.status).toBe(200);
    expect(session.parse(response.body).user).toMatchObject({ name: "Ines", admin: false });
    expect(cookieOf(response)).toMatch(/^clinograph=.*HttpOnly; SameSite=Lax/);
    expect(response.headers["cache-control"]).toBe("no-store");
  });

  it("answers a wrong password and an unknown address alike", async () => {
    const wrong = await signIn("otto@example.org", "not the password");
    const unknown = await signIn("nobody@example.org", "not the password");
    for (const response of [wrong, unknown]) {
      expect(response.status).toBe(401);
      expect(response.headers["www-authenticate"]).toContain("Bearer");
      expect(problem.parse(response.body).type).toBe("/problems/sign-in-failed");
    }
    expect({ ...wrong.body, instance: "" }).toEqual({ ...unknown.body, instance: "" });
  });

  it("slows down repeated failures for one address, and tells when to come back", async () => {
    await server.seedPerson("slow@example.org");
    for (let i = 0; i < 10; i++) expect((await signIn("slow@example.org", "wrong")).status).toBe(401);
    const refused = await signIn("slow@example.org");
    expect(refused.status).toBe(429);
    expect(Number(refused.headers["retry-after"])).toBeGreaterThan(0);
    expect((await signIn("ines@example.org")).status).toBe(200);
  });
});

describe("a session", () => {
  it("is told by GET /session and needs to be there", async () => {
    const agent = await server.agent("ines@example.org");
    const response = await agent.get("/api/v1/session");
    expect(session.parse(response.body).user.email).toBe("ines@example.org");
    expect((await server.guest().get("/api/v1/session")).status).toBe(401);
    const forged = await server.guest().get("/api/v1/session").set("Cookie", "clinograph=eyJhbGciOiJub25lIn0.e30.");
    expect(forged.status).toBe(401);
  });

  it("changes nothing without the CSRF token, or with that of another session", async () => {
    const signedIn = await signIn("ines@example.org");
    const cookie = cookieOf(signedIn).split(";")[0] as string;
    const other = await signIn("ines@example.org");
    const remove = () => server.guest().delete("/api/v1/session").set("Cookie", cookie);
    const bare = await remove();
    expect(bare.status).toBe(403);
    expect(bare.body.type).toBe("/problems/csrf-token");
    expect((await remove().set("X-CSRF-Token", other.body.csrfToken)).status).toBe(403);
    expect((await remove().set("X-CSRF-Token", signedIn.body.csrfToken)).status).toBe(204);
  });

  it("is over for every copy of its cookie after signing out, and others go on", async () => {
    const first = await signIn("ines@example.org");
    const second = await signIn("ines@example.org");
    const read = (response: typeof first) =>
      server
        .guest()
        .get("/api/v1/session")
        .set("Cookie", cookieOf(response).split(";")[0] as string);
    const out = await server
      .guest()
      .delete("/api/v1/session")
      .set("Cookie", cookieOf(first).split(";")[0] as string)
      .set("X-CSRF-Token", first.body.csrfToken);
    expect(out.status).toBe(204);
    expect(cookieOf(out)).toMatch(/^clinograph=;/);
    expect((await read(first)).status).toBe(401);
    expect((await read(second)).status).toBe(200);
  });

  it("ends when the password is changed, except the one that changed it", async () => {
    await server.seedPerson("pia@example.org");
    const old = await signIn("pia@example.org");
    const cookie = cookieOf(old).split(";")[0] as string;
    const change = (body: object) =>
      server
        .guest()
        .post("/api/v1/session/password")
        .set("Cookie", cookie)
        .set("X-CSRF-Token", old.body.csrfToken)
        .send(body);
    const wrong = await change({ current: "not it at all", password: "another long sentence" });
    expect(wrong.status).toBe(422);
    expect(wrong.body.errors[0].pointer).toBe("#/current");
    const changed = await change({ current: PASSWORD, password: "another long sentence" });
    expect(changed.status).toBe(200);
    expect((await server.guest().get("/api/v1/session").set("Cookie", cookie)).status).toBe(401);
    const fresh = cookieOf(changed).split(";")[0] as string;
    expect((await server.guest().get("/api/v1/session").set("Cookie", fresh)).status).toBe(200);
    expect((await signIn("pia@example.org")).status).toBe(401);
    expect((await signIn("pia@example.org", "another long sentence")).status).toBe(200);
  });

  it("ends when the account is closed", async () => {
    const user = await server.seedPerson("gone@example.org");
    const agent = await server.agent("gone@example.org");
    expect((await agent.get("/api/v1/session")).status).toBe(200);
    await server.context.db.write((w) => w.update(User, { disabledAt: Date.now() }, { id: user.id }));
    expect((await agent.get("/api/v1/session")).status).toBe(401);
    expect((await signIn("gone@example.org")).status).toBe(401);
  });
});

it("keeps passwords as argon2id and cookies secure under https", async () => {
  const user = await User.findOne({ where: { email: "ines@example.org" }, rejectOnEmpty: true });
  expect(user.passwordHash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
});
