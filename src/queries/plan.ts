import { useQuery } from "@pinia/colada";
import type { Plan } from "../../shared/schemas/plan.ts";
import { client } from "../api/client.ts";
import { keys } from "./keys.ts";
import { projectPath } from "./projects.ts";

export type Budget = Plan["budget"];

/** What the next build of a lane should check; the plan before stays until the new one came. */
export const usePlan = (project: () => string, lane: () => string | null, budget: () => Budget) =>
  useQuery({
    key: () => keys.plan(project(), lane() ?? "", `${budget().amount} ${budget().unit}`),
    enabled: () => lane() !== null,
    placeholderData: (previous: Plan | undefined) => previous,
    query: ({ signal }) =>
      client.get<Plan>(`${projectPath(project())}/plan`, {
        query: { lane: lane(), [budget().unit]: budget().amount },
        signal,
      }),
  });
