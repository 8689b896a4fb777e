import { z } from "zod";
import { buildDetail, buildRow } from "../../../shared/schemas/build.ts";
import { laneName, page, pageQuery, sha } from "../../../shared/schemas/common.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { pageOf, pageRequest } from "../../http/paging.ts";
import { NotFound } from "../../http/problem.ts";
import { summaryOf } from "../../record/buildSummary.ts";
import type { BuildSummary } from "../../record/buildSummary.ts";
import { numericId } from "../numericId.ts";
import { loadArrivals, loadBuild, loadBuilds } from "./loadBuilds.ts";
import { presentArrival, presentBuild } from "./present.ts";
import { urlsOf } from "./urls.ts";

export const readRoutes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/builds",
    summary: "Builds, newest first",
    tag: "Builds",
    auth: "caller",
    can: "build.read",
    query: z.strictObject({
      lane: laneName.optional(),
      branch: z.string().max(250).optional(),
      commit: sha.optional(),
      ...pageQuery,
    }),
    response: page(buildRow),
    handler: async ({ context, project, query }) => {
      const { after, limit } = pageRequest(query);
      const builds = await loadBuilds(context.db, project.id, query, { after, limit: limit + 1 });
      const summaries = new Map<number, BuildSummary>();
      for (const build of builds) summaries.set(build.id, await summaryOf(context.db, build));
      const urls = urlsOf(context.config.publicUrl, project.slug);
      return pageOf(builds, limit, (build) => presentBuild(build, summaries.get(build.id) as BuildSummary, urls));
    },
  }),
  defineRoute({
    method: "get",
    path: "/projects/:project/builds/:build",
    summary: "One build",
    tag: "Builds",
    auth: "caller",
    can: "build.read",
    params: { build: numericId },
    response: buildDetail,
    handler: async ({ context, project, params }) => {
      const build = await loadBuild(context.db, project.id, params.build);
      if (build === null) throw new NotFound();
      const urls = urlsOf(context.config.publicUrl, project.slug);
      const row = presentBuild(build, await summaryOf(context.db, build), urls);
      return { ...row, arrivals: (await loadArrivals(context.db, build.id)).map(presentArrival) };
    },
  }),
];
