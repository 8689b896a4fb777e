import { z } from "zod";
import { DEFAULT_LANE } from "../../../shared/domain/vocabulary.ts";
import { historyItem, historyQuery } from "../../../shared/schemas/block.ts";
import { strip } from "../../../shared/schemas/commit.ts";
import { laneName, page } from "../../../shared/schemas/common.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { NotFound } from "../../http/problem.ts";
import { findLane } from "../../record/laneBuilds.ts";
import { numericId } from "../numericId.ts";
import { tolerancesOf } from "../projects/settings.ts";
import { loadEntryHistory } from "./loadEntryHistory.ts";
import { loadStrip } from "./loadStrip.ts";

const index = z
  .string()
  .regex(/^\d{1,9}$/, "must be a whole number")
  .transform(Number);

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/strip",
    summary: "The commit-by-commit record of a lane, oldest first",
    tag: "History",
    auth: "caller",
    can: "project.read",
    query: z.strictObject({ lane: laneName.optional() }),
    response: strip,
    handler: async ({ context, project, query }) => {
      const name = query.lane ?? DEFAULT_LANE;
      const id = await findLane(context.db, project.id, name);
      return loadStrip(context.db, project.id, { id, name }, tolerancesOf(project).rtol, Date.now());
    },
  }),
  defineRoute({
    method: "get",
    path: "/projects/:project/blocks/:block/entries/:row/:column/history",
    summary: "One entry over the commits of a lane, oldest first",
    tag: "History",
    auth: "caller",
    can: "project.read",
    params: { block: numericId, row: index, column: index },
    query: historyQuery,
    response: page(historyItem),
    handler: async ({ context, project, params, query }) => {
      const { db } = context;
      const known = await db.select("SELECT 1 FROM blocks WHERE id = $1 AND projectId = $2", [
        params.block,
        project.id,
      ]);
      if (known.length === 0) throw new NotFound();
      const laneId = await findLane(db, project.id, query.lane ?? DEFAULT_LANE);
      if (laneId === null) return { items: [], next: null };
      const items = await loadEntryHistory(db, {
        projectId: project.id,
        laneId,
        blockId: params.block,
        row: params.row,
        column: params.column,
        branch: query.branch ?? null,
        limit: query.limit ?? 500,
      });
      return { items, next: null };
    },
  }),
];
