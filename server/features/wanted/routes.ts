import { z } from "zod";
import { laneName } from "../../../shared/schemas/common.ts";
import { postWanted, wanted, wantedItem } from "../../../shared/schemas/wanted.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { askForBuild, loadWanted } from "./service.ts";

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/wanted",
    summary: "What should be built next",
    tag: "Breaks",
    auth: "caller",
    can: "project.read",
    query: z.strictObject({ lane: laneName.optional() }),
    response: wanted,
    handler: async ({ context, project, query }) => ({
      items: await loadWanted(context.db, project, query.lane ?? null, Date.now()),
    }),
  }),
  defineRoute({
    method: "post",
    path: "/projects/:project/wanted",
    summary: "Ask for a build of a commit",
    tag: "Breaks",
    auth: "person",
    can: "wanted.ask",
    body: postWanted,
    status: 201,
    response: wantedItem,
    problems: ["not-found", "conflict"],
    handler: ({ context, project, actor, body }) => askForBuild(context, project, actor, body),
  }),
];
