import { describe, expect, it } from "vitest";
import type { Role, Scope } from "../../../shared/domain/roles.ts";
import { abilities, can, POLICIES } from "../../../server/features/policies.ts";
import type { Action } from "../../../server/features/policies.ts";
import { ANYONE } from "../../../server/http/actor.ts";
import type { Actor } from "../../../server/http/actor.ts";

const PROJECT = 7;
const person = (role: Role | null, admin = false): Actor => ({
  kind: "person",
  id: 1,
  name: "Somebody",
  email: "somebody@example.org",
  admin,
  sessionId: "s",
  sessionEndsAt: 0,
  roles: new Map(role === null ? [[PROJECT + 1, "lead"]] : [[PROJECT, role]]),
});
const token = (projectId: number, ...scopes: Scope[]): Actor => ({
  kind: "token",
  id: 1,
  name: "job",
  projectId,
  scopes,
});

/** The columns of the table; "stranger" leads another project, "elsewhere" is a token of another project. */
const ACTORS = {
  viewer: person("viewer"),
  developer: person("developer"),
  lead: person("lead"),
  admin: person(null, true),
  poster: token(PROJECT, "post"),
  reader: token(PROJECT, "read"),
  stranger: person(null),
  elsewhere: token(PROJECT + 1, "post", "read"),
  anyone: ANYONE,
} as const satisfies Record<string, Actor>;
type Name = keyof typeof ACTORS;

const MEMBERS: Name[] = ["viewer", "developer", "lead", "admin"];
const DEVELOPERS: Name[] = ["developer", "lead", "admin"];
const LEADS: Name[] = ["lead", "admin"];
const READERS: Name[] = [...MEMBERS, "reader"];
const POSTERS: Name[] = [...DEVELOPERS, "poster"];

/** Written out once more by hand, so that a change of the tables has to be meant. */
const TABLE: Record<Action, Name[]> = {
  "audit.read": LEADS,
  "baseline.read": READERS,
  "baseline.accept": LEADS,
  "break.read": READERS,
  "break.comment": DEVELOPERS,
  "break.assign": DEVELOPERS,
  "build.read": READERS,
  "gate.read": READERS,
  "build.post": POSTERS,
  "build.close": POSTERS,
  "commit.post": POSTERS,
  "wanted.ask": DEVELOPERS,
  "member.read": MEMBERS,
  "member.manage": LEADS,
  "people.manage": ["admin"],
  "project.list": [...READERS, "poster", "stranger", "elsewhere"],
  "project.create": ["admin"],
  "project.read": READERS,
  "project.edit": LEADS,
  "token.manage": LEADS,
  "waiver.read": READERS,
  "waiver.ask": DEVELOPERS,
  "waiver.decide": LEADS,
};

describe("who may do what", () => {
  it("is written out for every action", () => {
    expect(Object.keys(TABLE).toSorted()).toEqual(Object.keys(POLICIES).toSorted());
  });

  const cells = (Object.keys(TABLE) as Action[]).flatMap((action) =>
    (Object.keys(ACTORS) as Name[]).map((name) => ({ action, name, allowed: TABLE[action].includes(name) })),
  );
  it.each(cells)("$name, $action: $allowed", ({ action, name, allowed }) => {
    expect(can(ACTORS[name], action, { projectId: PROJECT })).toBe(allowed);
  });

  it("is nobody, for an action that no table has", () => {
    for (const actor of Object.values(ACTORS)) {
      for (const action of ["toString", "constructor", "project.burn"]) {
        expect(can(actor, action as Action, { projectId: PROJECT })).toBe(false);
      }
    }
  });

  it("asks for a project where the action is one of a project", () => {
    expect(can(ACTORS.admin, "project.edit")).toBe(false);
    expect(abilities(ACTORS.lead, ["project.edit", "project.create"], { projectId: PROJECT })).toEqual({
      "project.edit": true,
      "project.create": false,
    });
  });
});
