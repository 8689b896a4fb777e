import { z } from "zod";
import { page, pageQuery } from "../../../shared/schemas/common.ts";
import { oneTimeLink, patchPerson as patchBody, personRow } from "../../../shared/schemas/people.ts";
import type { User } from "../../db/models/User.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import { pageOf, pageRequest } from "../../http/paging.ts";
import { time } from "../../http/present.ts";
import { linkForPerson, listPeople, patchPerson } from "./service.ts";

function presentPerson(user: User): z.input<typeof personRow> {
  return {
    id: String(user.id),
    name: user.name,
    email: user.email,
    admin: user.admin,
    pending: user.passwordHash === null,
    disabled: user.disabledAt !== null,
    since: time(user.createdAt),
  };
}

export const routes = [
  defineRoute({
    method: "get",
    path: "/people",
    summary: "Everybody, in the order they came",
    tag: "People",
    auth: "person",
    can: "people.manage",
    query: z.strictObject(pageQuery),
    response: page(personRow),
    handler: async ({ query }) => {
      const request = pageRequest(query);
      return pageOf(await listPeople(request), request.limit, presentPerson);
    },
  }),
  defineRoute({
    method: "patch",
    path: "/people/:person",
    summary: "Close or reopen an account, make or unmake an administrator",
    tag: "People",
    auth: "person",
    can: "people.manage",
    body: patchBody,
    response: personRow,
    problems: ["conflict"],
    handler: async ({ context, actor, params, body }) =>
      presentPerson(await patchPerson(context, actor, params.person, body)),
  }),
  defineRoute({
    method: "post",
    path: "/people/:person/link",
    summary: "Make a one-time link at which the person sets a password",
    tag: "People",
    auth: "person",
    can: "people.manage",
    response: oneTimeLink,
    status: 201,
    handler: async ({ context, actor, params }) => ({ link: await linkForPerson(context, actor, params.person) }),
  }),
];
