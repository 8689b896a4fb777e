import { z } from "zod";
import { acceptBaseline as acceptBody, baseline as baselineSchema } from "../../../shared/schemas/baseline.ts";
import type { BaselineRow } from "../../../shared/schemas/baseline.ts";
import { page, pageQuery } from "../../../shared/schemas/common.ts";
import type { Baseline } from "../../db/models/Baseline.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { pageOf, pageRequest } from "../../http/paging.ts";
import { time } from "../../http/present.ts";
import { nameIn, namesOf } from "../people/names.ts";
import { acceptBaseline, listBaselines } from "./service.ts";

function presentBaseline(row: Baseline, names: ReadonlyMap<number, string>): BaselineRow {
  return {
    id: String(row.id),
    selector: JSON.parse(row.selector) as BaselineRow["selector"],
    commit: row.sha,
    reason: row.reason,
    acceptedBy: nameIn(names, row.acceptedById),
    acceptedAt: time(row.acceptedAt),
  };
}

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/baselines",
    summary: "Accepted baselines, newest first",
    tag: "Drift",
    auth: "caller",
    can: "baseline.read",
    query: z.strictObject(pageQuery),
    response: page(baselineSchema),
    handler: async ({ project, query }) => {
      const request = pageRequest(query);
      const rows = await listBaselines(project, request);
      const names = await namesOf(rows.map((row) => row.acceptedById));
      return pageOf(rows, request.limit, (row) => presentBaseline(row, names));
    },
  }),
  defineRoute({
    method: "post",
    path: "/projects/:project/baselines",
    summary: "Accept a new baseline for drift",
    description:
      "From the given commit of the default branch on, the drift of the selected entries is measured anew; their climbs end there.",
    tag: "Drift",
    auth: "person",
    can: "baseline.accept",
    body: acceptBody,
    response: baselineSchema,
    status: 201,
    problems: ["invalid"],
    handler: async ({ context, actor, project, body }) => {
      const accepted = await acceptBaseline(context, actor, project, body);
      return presentBaseline(accepted, await namesOf([accepted.acceptedById]));
    },
  }),
];
