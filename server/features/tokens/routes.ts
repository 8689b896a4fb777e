import { z } from "zod";
import type { Scope } from "../../../shared/domain/roles.ts";
import { page, pageQuery } from "../../../shared/schemas/common.ts";
import { createdToken, createToken as createTokenBody, tokenRow } from "../../../shared/schemas/token.ts";
import type { TokenRow } from "../../../shared/schemas/token.ts";
import type { Token } from "../../db/models/Token.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import { pageOf, pageRequest } from "../../http/paging.ts";
import { time, timeOrNull } from "../../http/present.ts";
import { nameIn, namesOf } from "../people/names.ts";
import { createToken, listTokens, revokeToken } from "./service.ts";

function presentToken(token: Token, createdBy: string | null): TokenRow {
  return {
    id: String(token.id),
    name: token.name,
    prefix: token.prefix,
    scopes: JSON.parse(token.scopes) as Scope[],
    createdBy,
    createdAt: time(token.createdAt),
    lastUsedAt: timeOrNull(token.lastUsedAt ?? null),
    expiresAt: timeOrNull(token.expiresAt ?? null),
  };
}

export const routes = [
  defineRoute({
    method: "get",
    path: "/projects/:project/tokens",
    summary: "Tokens of the project that are not revoked, newest first",
    tag: "Tokens",
    auth: "person",
    can: "token.manage",
    query: z.strictObject(pageQuery),
    response: page(tokenRow),
    handler: async ({ project, query }) => {
      const request = pageRequest(query);
      const rows = await listTokens(project, request);
      const names = await namesOf(rows.map((row) => row.createdById));
      return pageOf(rows, request.limit, (row) => presentToken(row, nameIn(names, row.createdById)));
    },
  }),
  defineRoute({
    method: "post",
    path: "/projects/:project/tokens",
    summary: "Make a token",
    description: "The token is told once, here.",
    tag: "Tokens",
    auth: "person",
    can: "token.manage",
    body: createTokenBody,
    response: createdToken,
    status: 201,
    handler: async ({ context, actor, project, body }) => {
      const { token, text } = await createToken(context, actor, project, body);
      return { ...presentToken(token, actor.name), token: text };
    },
  }),
  defineRoute({
    method: "delete",
    path: "/projects/:project/tokens/:token",
    summary: "Revoke a token, at once",
    tag: "Tokens",
    auth: "person",
    can: "token.manage",
    response: null,
    handler: async ({ context, actor, project, params }) => {
      await revokeToken(context, actor, project, params.token);
    },
  }),
];
