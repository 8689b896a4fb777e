import { z } from "zod";
import { page, pageQuery } from "../../../shared/schemas/common.ts";
import { addedMember, addMember as addBody, member, patchMember } from "../../../shared/schemas/people.ts";
import type { Member } from "../../../shared/schemas/people.ts";
import type { Actor } from "../../http/actor.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import { pageOf, pageRequest } from "../../http/paging.ts";
import { time } from "../../http/present.ts";
import { abilities } from "../policies.ts";
import { addMember, changeRole, listMembers, removeMember } from "./service.ts";
import type { MemberRow } from "./service.ts";

function presentMember(actor: Actor, { membership, user }: MemberRow): Member {
  return {
    person: {
      id: String(user.id),
      name: user.name,
      email: user.email,
      admin: user.admin,
      pending: (user.passwordHash ?? null) === null,
    },
    role: membership.role,
    since: time(membership.createdAt),
    abilities: abilities(actor, ["member.manage"], { projectId: membership.projectId }),
  };
}

export const routes = [
  defineRoute({
    method: "get",
    path: "/projects/:project/members",
    summary: "Members, in the order they came",
    tag: "Members",
    auth: "person",
    can: "member.read",
    query: z.strictObject(pageQuery),
    response: page(member),
    handler: async ({ actor, project, query }) => {
      const request = pageRequest(query);
      return pageOf(await listMembers(project, request), request.limit, (row) => presentMember(actor, row));
    },
  }),
  defineRoute({
    method: "post",
    path: "/projects/:project/invitations",
    summary: "Make a person a member",
    description: "Who is new here gets a one-time link, told once, here.",
    tag: "Members",
    auth: "person",
    can: "member.manage",
    body: addBody,
    response: addedMember,
    status: 201,
    problems: ["conflict"],
    handler: async ({ context, actor, project, body }) => {
      const added = await addMember(context, actor, project, body);
      return { member: presentMember(actor, added), link: added.link };
    },
  }),
  defineRoute({
    method: "patch",
    path: "/projects/:project/members/:person",
    summary: "Change a member's role",
    tag: "Members",
    auth: "person",
    can: "member.manage",
    body: patchMember,
    response: member,
    handler: async ({ context, actor, project, params, body }) =>
      presentMember(actor, await changeRole(context, actor, project, { userId: params.person, role: body.role })),
  }),
  defineRoute({
    method: "delete",
    path: "/projects/:project/members/:person",
    summary: "End a membership",
    tag: "Members",
    auth: "person",
    can: "member.manage",
    response: null,
    handler: async ({ context, actor, project, params }) => {
      await removeMember(context, actor, project, params.person);
    },
  }),
];
