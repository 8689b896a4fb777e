import { DEFAULT_LANE } from "../../../shared/domain/vocabulary.ts";
import { climb, climbsQuery } from "../../../shared/schemas/climb.ts";
import { page } from "../../../shared/schemas/common.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { NotFound } from "../../http/problem.ts";
import { pageRequest, pageSlice } from "../../http/paging.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import { findLane, loadLaneBuilds } from "../../record/laneBuilds.ts";
import { loadClimbsAt } from "./loadClimbs.ts";
import { presentClimb } from "./present.ts";
import { traceClimb } from "./traceClimb.ts";

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/climbs",
    summary: "Climbs and jumps of a lane, newest first",
    description:
      "Rises of the relative error that the tolerance does not see, along the default branch, with the commits that may have caused them. `at` speaks of what was known with that commit; `state` defaults to open.",
    tag: "Drift",
    auth: "caller",
    can: "break.read",
    query: climbsQuery,
    response: page(climb),
    handler: async ({ context, project, query }) => {
      const lane = query.lane ?? DEFAULT_LANE;
      const laneId = await findLane(context.db, project.id, lane);
      if (laneId === null) return { items: [], next: null };
      const at = query.at ?? null;
      const history = await loadGraph(context.db, project.id);
      if (at !== null && !history.graph.has(at)) throw new NotFound(`Commit ${at} is not known.`);
      const builds = await loadLaneBuilds(context.db, laneId);
      const ofLane = { projectId: project.id, laneId, project: history, builds };
      const found = await loadClimbsAt(context.db, ofLane, at);
      const state = query.state ?? "open";
      const chosen = found.groups.filter((group) => state === "all" || group.openCount > 0 === (state === "open"));
      const { items, next } = pageSlice(chosen, pageRequest(query), (group) => group);
      const place = { lane, until: found.until, commitUrl: project.commitUrl ?? null };
      const rows = [];
      for (const group of items) {
        const traced = await traceClimb(context.db, ofLane, group, found);
        rows.push(presentClimb(traced, place));
      }
      return { items: rows, next };
    },
  }),
];
