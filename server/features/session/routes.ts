import { changePassword as changePasswordBody, credentials, session } from "../../../shared/schemas/people.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import { openSession } from "./openSession.ts";
import { presentSession } from "./present.ts";
import { changePassword, endSession, signIn } from "./service.ts";
import { clearSessionCookie } from "./sessionCookie.ts";

export const routes = [
  defineRoute({
    method: "post",
    path: "/session",
    summary: "Sign in",
    description: "Sets the session cookie. Repeated failures are slowed down.",
    tag: "Session",
    auth: "anyone",
    can: null,
    body: credentials,
    response: session,
    problems: ["sign-in-failed"],
    handler: async ({ context, body, request, response }) => {
      const user = await signIn(context, body, request.ip ?? "unknown");
      return openSession(context, response, user);
    },
  }),
  defineRoute({
    method: "get",
    path: "/session",
    summary: "Who is signed in",
    tag: "Session",
    auth: "person",
    can: null,
    response: session,
    handler: async ({ context, actor }) => presentSession(context, actor, actor.sessionId),
  }),
  defineRoute({
    method: "delete",
    path: "/session",
    summary: "Sign out",
    tag: "Session",
    auth: "person",
    can: null,
    response: null,
    handler: async ({ context, actor, response }) => {
      await endSession(context, actor);
      clearSessionCookie(context.config, response);
    },
  }),
  defineRoute({
    method: "post",
    path: "/session/password",
    summary: "Change one's password",
    description: "Ends every other session of the person.",
    tag: "Session",
    auth: "person",
    can: null,
    body: changePasswordBody,
    response: session,
    handler: async ({ context, actor, body, request, response }) => {
      const user = await changePassword(context, actor, body, request.ip ?? "unknown");
      return openSession(context, response, user);
    },
  }),
];
