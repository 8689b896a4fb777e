import { DEFAULT_LANE } from "../../../shared/domain/vocabulary.ts";
import { plan, planQuery } from "../../../shared/schemas/plan.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { findLane } from "../../record/laneBuilds.ts";
import { checkLimitOf } from "../projects/settings.ts";
import { loadPlan } from "./loadPlan.ts";

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/plan",
    summary: "What the next build should check within a budget",
    description: [
      "Exactly one of `seconds` and `evaluations` is the budget of one build. Half of it goes round all columns by how",
      "long they have waited; the other half goes where a check is worth most: open breaks, climbs, changed sources,",
      "columns never checked. Costs are the newest that were posted with the references. Where only one of seconds and",
      "evaluations was told, the project's median rate converts it (one evaluation counts as one second where there is",
      "none); where neither was, two evaluations a column and step are assumed for central differences, one for the",
      "others. `everyBuilds` is a promise: builds that follow their plans with this budget check every column, new ones",
      "included, at least once in so many builds, whatever is urgent.",
    ].join("\n"),
    tag: "Builds",
    auth: "caller",
    can: "project.read",
    query: planQuery,
    response: plan,
    handler: async ({ context, project, query }) => {
      const lane = query.lane ?? DEFAULT_LANE;
      const { seconds, evaluations } = query;
      return loadPlan(context.db, {
        projectId: project.id,
        lane,
        laneId: await findLane(context.db, project.id, lane),
        budget:
          seconds === undefined
            ? { unit: "evaluations", amount: evaluations ?? 0 }
            : { unit: "seconds", amount: seconds },
        limit: checkLimitOf(project),
        now: Date.now(),
      });
    },
  }),
];
