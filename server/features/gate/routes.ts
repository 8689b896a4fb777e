import { DEFAULT_LANE } from "../../../shared/domain/vocabulary.ts";
import { gate, gateQuery } from "../../../shared/schemas/gate.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { urlsOf } from "../builds/urls.ts";
import { policyOf } from "../projects/settings.ts";
import { loadGate } from "./loadGate.ts";
import { presentGate } from "./present.ts";

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/gate",
    summary: "May this commit be merged",
    description:
      "Only what is new against the base speaks. `base` is, if not given, the newest judged ancestor on the default branch. `wait` while shards are missing, `unknown` without a build.",
    tag: "Gate",
    auth: "caller",
    can: "gate.read",
    query: gateQuery,
    response: gate,
    handler: async ({ context, project, query }) => {
      const question = {
        project: { id: project.id, policy: policyOf(project) },
        lane: query.lane ?? DEFAULT_LANE,
        commit: query.commit,
        base: query.base ?? null,
      };
      const answer = await loadGate(context.db, question, Date.now());
      return presentGate(question, answer, urlsOf(context.config.publicUrl, project.slug));
    },
  }),
];
