import type { Request } from "express";
import type { Context } from "../../context.ts";
import { EndedSession } from "../../db/models/EndedSession.ts";
import { Membership } from "../../db/models/Membership.ts";
import { User } from "../../db/models/User.ts";
import type { PersonActor } from "../../http/actor.ts";
import { sessionCookieOf } from "./sessionCookie.ts";
import { readSession } from "./sessionToken.ts";

/** The person whose session the cookie holds; null where there is none that is still good. */
export async function callerOfSession(context: Context, request: Request): Promise<PersonActor | null> {
  const cookie = sessionCookieOf(context.config, request);
  const claims = cookie === null ? null : readSession(context, cookie);
  if (claims === null) return null;
  const user = await User.findByPk(claims.sub);
  if (user === null || user.disabledAt !== null || user.sessionVersion !== claims.ver) return null;
  if ((await EndedSession.findByPk(claims.jti)) !== null) return null;
  const memberships = await Membership.findAll({ where: { userId: user.id } });
  return {
    kind: "person",
    id: user.id,
    name: user.name,
    email: user.email,
    admin: user.admin,
    sessionId: claims.jti,
    sessionEndsAt: claims.exp * 1000,
    roles: new Map(memberships.map((membership) => [membership.projectId, membership.role])),
  };
}
