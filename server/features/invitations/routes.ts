import { acceptInvitation as acceptBody, session, setUp as setUpBody } from "../../../shared/schemas/people.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import { openSession } from "../session/openSession.ts";
import { acceptInvitation, setUp } from "./service.ts";

export const routes = [
  defineRoute({
    method: "post",
    path: "/set-up",
    summary: "Make the first administrator with the one-time set-up link, and sign in",
    tag: "Session",
    auth: "anyone",
    can: null,
    body: setUpBody,
    response: session,
    status: 201,
    problems: ["not-found", "conflict"],
    handler: async ({ context, body, response }) => openSession(context, response, await setUp(context, body)),
  }),
  defineRoute({
    method: "post",
    path: "/invitations/accept",
    summary: "Set name and password with a one-time link, and sign in",
    tag: "Session",
    auth: "anyone",
    can: null,
    body: acceptBody,
    response: session,
    status: 201,
    problems: ["not-found"],
    handler: async ({ context, body, response }) =>
      openSession(context, response, await acceptInvitation(context, body)),
  }),
];
