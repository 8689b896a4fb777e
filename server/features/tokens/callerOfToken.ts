import type { Scope } from "../../../shared/domain/roles.ts";
import type { Context } from "../../context.ts";
import { Token } from "../../db/models/Token.ts";
import type { TokenActor } from "../../http/actor.ts";
import { Unauthorized } from "../../http/problem.ts";
import { hashSecret, isTokenText } from "./tokenText.ts";

const LAST_USED_STEP_MS = 60_000;

/** @throws Unauthorized where the token is mistyped, unknown, expired or revoked. */
export async function callerOfToken(context: Context, text: string): Promise<TokenActor> {
  if (!isTokenText(text)) throw new Unauthorized("This is no token of ours: it may be cut off.", "invalid_token");
  const token = await Token.findOne({ where: { hash: hashSecret(text) } });
  if (token === null || token.revokedAt !== null) {
    throw new Unauthorized("The token is not known, or was revoked.", "invalid_token");
  }
  const now = Date.now();
  if (token.expiresAt !== null && token.expiresAt <= now) {
    throw new Unauthorized("The token has expired.", "invalid_token");
  }
  if (now - (token.lastUsedAt ?? 0) >= LAST_USED_STEP_MS) noteUse(context, token.id, now);
  return {
    kind: "token",
    id: token.id,
    name: token.name,
    projectId: token.projectId,
    scopes: JSON.parse(token.scopes) as Scope[],
  };
}

/** Queued behind what is being written; nobody waits for it. */
function noteUse(context: Context, id: number, at: number): void {
  context.background("note the use of a token", () =>
    context.db.write((writer) => writer.update(Token, { lastUsedAt: at }, { id })),
  );
}
