import type { Request } from "express";
import type { Context } from "../context.ts";
import { callerOfToken } from "../features/tokens/callerOfToken.ts";
import { callerOfSession } from "../features/session/callerOfSession.ts";
import { csrfTokenMatches } from "../features/session/csrfToken.ts";
import { ANYONE } from "./actor.ts";
import type { Actor, Caller } from "./actor.ts";
import type { Auth } from "./defineRoute.ts";
import { Forbidden, Unauthorized } from "./problem.ts";

/**
 * Who is asking. A token in the Authorization header goes before the cookie. What a cookie changes must also carry the
 * CSRF token; a header that only our own code can set needs no second proof.
 * @throws Unauthorized, Forbidden
 */
export async function authenticate(context: Context, auth: Auth, request: Request): Promise<Actor> {
  if (auth === "anyone") return ANYONE;
  const actor = await callerOf(context, request);
  if (auth === "person" && actor.kind !== "person") {
    throw new Forbidden("A token cannot do this: it is for people who signed in.");
  }
  return actor;
}

async function callerOf(context: Context, request: Request): Promise<Caller> {
  const { authorization } = request.headers;
  if (authorization !== undefined) {
    const bearer = /^Bearer +(\S+)$/i.exec(authorization.trim())?.[1];
    if (bearer === undefined) throw new Unauthorized("The Authorization header must be: Bearer and a token.");
    return callerOfToken(context, bearer);
  }
  const person = await callerOfSession(context, request);
  if (person === null) throw new Unauthorized("Sign in, or send a token.");
  const changes = request.method !== "GET" && request.method !== "HEAD";
  if (changes && !csrfTokenMatches(context, person.sessionId, request.get("x-csrf-token"))) {
    throw new Forbidden("The header X-CSRF-Token is missing or is not that of this session.", "csrf-token");
  }
  return person;
}
