import { z } from "zod";
import { DEFAULT_LANE } from "../../../shared/domain/vocabulary.ts";
import { laneName, sha } from "../../../shared/schemas/common.ts";
import { overview } from "../../../shared/schemas/project.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { NotFound } from "../../http/problem.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import { findLane } from "../../record/laneBuilds.ts";
import { tolerancesOf } from "../projects/settings.ts";
import { loadOverview } from "./loadOverview.ts";

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/summary",
    summary: "The overview of one commit of a lane",
    description: "`at` defaults to the newest judged commit of the default branch.",
    tag: "History",
    auth: "caller",
    can: "project.read",
    query: z.strictObject({ lane: laneName.optional(), at: sha.optional() }),
    response: overview,
    handler: async ({ context, project, query }) => {
      const lane = query.lane ?? DEFAULT_LANE;
      const at = query.at ?? null;
      if (at !== null && !(await loadGraph(context.db, project.id)).graph.has(at)) {
        throw new NotFound(`Commit ${at} is not known.`);
      }
      const laneId = await findLane(context.db, project.id, lane);
      const { rtol } = tolerancesOf(project);
      return loadOverview(context.db, { projectId: project.id, lane, laneId, at, rtol }, Date.now());
    },
  }),
];
