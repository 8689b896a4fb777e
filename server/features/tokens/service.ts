import { Op } from "sequelize";
import type { Scope } from "../../../shared/domain/roles.ts";
import type { Context } from "../../context.ts";
import type { Project } from "../../db/models/Project.ts";
import { Token } from "../../db/models/Token.ts";
import type { PersonActor } from "../../http/actor.ts";
import type { PageRequest } from "../../http/paging.ts";
import { NotFound } from "../../http/problem.ts";
import { timeToCome } from "../../http/validate.ts";
import { audit } from "../audit/audit.ts";
import { hashSecret, newTokenText, shownPrefix } from "./tokenText.ts";

interface TokenWish {
  readonly name: string;
  readonly scopes: readonly Scope[];
  readonly expiresAt?: string | undefined;
}

/** The text of the token is told by this answer and by nothing else. */
export async function createToken(
  context: Context,
  actor: PersonActor,
  project: Project,
  wish: TokenWish,
): Promise<{ token: Token; text: string }> {
  const now = Date.now();
  const expiresAt = wish.expiresAt === undefined ? null : timeToCome(wish.expiresAt, "#/expiresAt", now);
  const text = newTokenText();
  const scopes = [...new Set(wish.scopes)];
  const token = await context.db.write(async (writer) => {
    await audit(writer, actor, "token.create", { projectId: project.id, target: wish.name, detail: { scopes } });
    return writer.create(Token, {
      projectId: project.id,
      name: wish.name,
      prefix: shownPrefix(text),
      hash: hashSecret(text),
      scopes: JSON.stringify(scopes),
      createdById: actor.id,
      createdAt: now,
      expiresAt,
    });
  });
  return { token, text };
}

/** Tokens that were not revoked, newest first, one more than the page holds. */
export function listTokens(project: Project, { limit, after }: PageRequest): Promise<Token[]> {
  return Token.findAll({
    where: { projectId: project.id, revokedAt: null, ...(after === null ? {} : { id: { [Op.lt]: after } }) },
    order: [["id", "DESC"]],
    limit: limit + 1,
  });
}

/** @throws NotFound */
export async function revokeToken(context: Context, actor: PersonActor, project: Project, id: string): Promise<void> {
  await context.db.write(async (writer) => {
    const token = await Token.findOne({
      where: { id, projectId: project.id, revokedAt: null },
      transaction: writer.transaction,
    });
    if (token === null) throw new NotFound();
    await writer.update(Token, { revokedAt: Date.now() }, { id: token.id });
    await audit(writer, actor, "token.revoke", { projectId: project.id, target: token.name });
  });
}
