import type { Response } from "express";
import type { Session } from "../../../shared/schemas/people.ts";
import type { Context } from "../../context.ts";
import type { User } from "../../db/models/User.ts";
import { presentSession } from "./present.ts";
import { setSessionCookie } from "./sessionCookie.ts";
import { issueSession } from "./sessionToken.ts";

/** Gives the browser a session of this person, and says what it may know of it. */
export function openSession(context: Context, response: Response, user: User): Session {
  const { token, sessionId } = issueSession(context, user);
  setSessionCookie(context.config, response, token);
  return presentSession(context, user, sessionId);
}
