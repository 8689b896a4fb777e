import { randomUUID } from "node:crypto";
import jwt from "jsonwebtoken";
import { z } from "zod";
import type { Context } from "../../context.ts";
import type { User } from "../../db/models/User.ts";
import { SESSION_SECONDS } from "./sessionCookie.ts";

const claims = z.object({
  sub: z.string().regex(/^\d+$/).transform(Number),
  jti: z.string(),
  /** The person's session version: raised, it ends every session given before. */
  ver: z.number().int(),
  exp: z.number().int(),
});
export type SessionClaims = z.output<typeof claims>;

const ISSUER = "clinograph";

export interface IssuedSession {
  readonly token: string;
  readonly sessionId: string;
}

export function issueSession(context: Context, user: User): IssuedSession {
  const sessionId = randomUUID();
  const token = jwt.sign({ ver: user.sessionVersion }, context.keys.session, {
    algorithm: "HS256",
    subject: String(user.id),
    jwtid: sessionId,
    issuer: ISSUER,
    expiresIn: SESSION_SECONDS,
  });
  return { token, sessionId };
}

/** Null where the token was not signed here, was changed, or is over. */
export function readSession(context: Context, token: string): SessionClaims | null {
  try {
    return claims.parse(jwt.verify(token, context.keys.session, { algorithms: ["HS256"], issuer: ISSUER }));
  } catch {
    return null;
  }
}
