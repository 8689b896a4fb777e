import { z } from "zod";
import { buildDocument, postedBuild } from "../../../shared/schemas/build.ts";
import { postCommits, postedCommits } from "../../../shared/schemas/commit.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { raw } from "../../http/rawBody.ts";
import { reply } from "../../http/reply.ts";
import { numericId } from "../numericId.ts";
import { postCommitHistory } from "./commits.ts";
import { closeBuild, completePending } from "./complete.ts";
import { postBuild } from "./post.ts";
import { readRoutes } from "./readRoutes.ts";

/** The ten thousand commits that one request may tell, with their changed paths. */
const MAX_HISTORY_BYTES = 16 * 1024 * 1024;

export const routes: Route[] = [
  defineRoute({
    method: "post",
    path: "/projects/:project/builds",
    summary: "Post a build, or one shard of it",
    description:
      "The key of a posting is (project, lane, commit, run.id, shard.index): the same body again is answered as before, another one under the same key is refused. `Prefer: respond-async` answers 202 as soon as the posting is safe.",
    tag: "Posting",
    auth: "caller",
    can: "build.post",
    query: z.strictObject({ dryRun: z.literal("1").optional() }),
    body: raw({ describedBy: buildDocument }),
    status: 201,
    response: postedBuild,
    responses: {
      200: { description: "Posted before with the same body, or a dry run: nothing was added.", schema: postedBuild },
      202: { description: "Safe, and still to be judged: see the address in Location.", schema: postedBuild },
    },
    problems: ["malformed-request", "too-large", "unsupported-media", "conflict", "invalid"],
    handler: async ({ context, project, query, body, request }) => {
      const later = /\brespond-async\b/i.test(request.get("prefer") ?? "");
      const mode = query.dryRun === "1" ? "dry-run" : later ? "respond-async" : "kept";
      const { answer, repeated } = await postBuild(context, project, body, mode);
      if (mode !== "respond-async") return reply(repeated || mode === "dry-run" ? 200 : 201, answer);
      context.background("complete pending builds", () => completePending(context));
      const location = `/api/v1/projects/${project.slug}/builds/${answer.build.id}`;
      return reply(202, answer, { Location: location, "Preference-Applied": "respond-async" });
    },
  }),
  defineRoute({
    method: "post",
    path: "/projects/:project/builds/:build/close",
    summary: "Complete a build without its missing shards",
    tag: "Posting",
    auth: "caller",
    can: "build.close",
    params: { build: numericId },
    response: postedBuild,
    problems: ["conflict"],
    handler: ({ context, project, params }) => closeBuild(context, project, params.build),
  }),
  defineRoute({
    method: "post",
    path: "/projects/:project/commits",
    summary: "Add history alone",
    description: "Tells commits that no build came with, so that suspects between two builds are known.",
    tag: "Posting",
    auth: "caller",
    can: "commit.post",
    body: postCommits,
    maxBodyBytes: MAX_HISTORY_BYTES,
    response: postedCommits,
    problems: ["conflict", "invalid"],
    handler: ({ context, project, body }) => postCommitHistory(context, project, body.commits),
  }),
  ...readRoutes,
];
