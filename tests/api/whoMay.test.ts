import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { Waiver } from "../../server/db/models/Waiver.ts";
import { ROUTES } from "../../server/features/routes.ts";
import type { Route } from "../../server/http/defineRoute.ts";
import { PASSWORD, startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";
import { can } from "../../server/features/policies.ts";
import { callerOfToken } from "../../server/features/tokens/callerOfToken.ts";
import { User } from "../../server/db/models/User.ts";
import { Membership } from "../../server/db/models/Membership.ts";
import type { Actor } from "../../server/http/actor.ts";
import { mayKnow } from "../../server/http/actor.ts";

let server: TestServer;
let hull: SeededProject;
let waiver: Waiver;
beforeAll(async () => {
  server = await startTestServer();
  hull = await server.seedProject("hull", {
    "viewer@example.org": "viewer",
    "developer@example.org": "developer",
    "lead@example.org": "lead",
  });
  await server.seedProject("keel", { "stranger@example.org": "lead" });
  await server.seedPerson("admin@example.org", { admin: true });
  waiver = await server.context.db.write((w) =>
    w.create(Waiver, {
      projectId: hull.project.id,
      state: "rejected",
      selector: '{"model":"rotor.*"}',
      reason: "known",
      maxError: 1,
      expiresAt: 0,
      askedAt: 0,
    }),
  );
});
afterAll(() => server.close());

const ACTORS = ["viewer", "developer", "lead", "admin", "stranger", "post", "read", "anyone"] as const;
type Name = (typeof ACTORS)[number];
const isToken = (name: Name): name is "post" | "read" => name === "post" || name === "read";

function addressOf(route: Route): string {
  return `/api/v1${route.path}`
    .replace(":project", hull.slug)
    .replace(":waiver", String(waiver.id))
    .replace(/:\w+/g, "999999");
}

async function ask(name: Name, route: Route): Promise<number> {
  const address = addressOf(route);
  if (name === "anyone") return (await server.guest()[route.method](address)).status;
  if (isToken(name)) {
    const request = server.guest()[route.method](address).set("Authorization", `Bearer ${hull.tokens[name]}`);
    return (await request).status;
  }
  return (await (await server.agent(`${name}@example.org`))[route.method](address)).status;
}

async function actorOf(name: Name): Promise<Actor> {
  if (name === "anyone") return { kind: "anyone" };
  if (isToken(name)) return callerOfToken(server.context, hull.tokens[name]);
  const user = await User.findOne({ where: { email: `${name}@example.org` }, rejectOnEmpty: true });
  const memberships = await Membership.findAll({ where: { userId: user.id } });
  const roles = new Map(memberships.map((m) => [m.projectId, m.role]));
  const { id, email, admin } = user;
  return { kind: "person", id, name, email, admin, sessionId: "", sessionEndsAt: 0, roles };
}

/** What the tables say that a refusal must be; null = let in. */
function refusal(actor: Actor, route: Route): number | null {
  if (actor.kind === "anyone") return 401;
  if (route.auth === "person" && actor.kind === "token") return 403;
  const ofProject = route.path.startsWith("/projects/:project") || route.locate !== null;
  if (ofProject && !mayKnow(actor, hull.project.id)) return 404;
  const target = ofProject ? { projectId: hull.project.id } : {};
  return route.can !== null && !can(actor, route.can, target) ? 403 : null;
}

const guarded = ROUTES.filter((route) => route.auth !== "anyone" && route.path !== "/session");
describe.each(ACTORS)("%s", (name) => {
  it.each(guarded.map((route) => ({ route, title: `${route.method} ${route.path}` })))(
    "is let in or refused as the tables say: $title",
    async ({ route }) => {
      const expected = refusal(await actorOf(name), route);
      const status = await ask(name, route);
      if (expected === null) expect([401, 403]).not.toContain(status);
      else expect(status).toBe(expected);
      expect(status).toBeLessThan(500);
    },
  );
});

it("does not tell a project that one may not know of from one that does not exist", async () => {
  const stranger = await server.agent("stranger@example.org");
  const hidden = await stranger.get(`/api/v1/projects/${hull.slug}`);
  const missing = await stranger.get("/api/v1/projects/nothing-here");
  expect(hidden.status).toBe(404);
  expect({ ...hidden.body, instance: "" }).toEqual({ ...missing.body, instance: "" });
});

it("lets nobody in with the right password of a closed account", async () => {
  const user = await server.seedPerson("closed@example.org");
  await server.context.db.write((w) => w.update(User, { disabledAt: 1 }, { id: user.id }));
  const response = await server.guest().post("/api/v1/session").send({ email: user.email, password: PASSWORD });
  expect(response.status).toBe(401);
});
