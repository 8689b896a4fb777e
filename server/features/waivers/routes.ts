import { z } from "zod";
import { WAIVER_STATES } from "../../../shared/domain/vocabulary.ts";
import { page, pageQuery } from "../../../shared/schemas/common.ts";
import { createWaiver, waiver as waiverSchema } from "../../../shared/schemas/waiver.ts";
import type { WaiverRow } from "../../../shared/schemas/waiver.ts";
import type { Waiver } from "../../db/models/Waiver.ts";
import type { Actor } from "../../http/actor.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Locate } from "../../http/defineRoute.ts";
import { pageOf, pageRequest } from "../../http/paging.ts";
import { time, timeOrNull } from "../../http/present.ts";
import { nameIn, namesOf } from "../people/names.ts";
import { abilities } from "../policies.ts";
import { askForWaiver, decideWaiver, listWaivers, projectOfWaiver } from "./service.ts";
import type { Decision } from "./service.ts";

function presentWaiver(actor: Actor, waiver: Waiver, names: ReadonlyMap<number, string>): WaiverRow {
  return {
    id: String(waiver.id),
    state: waiver.state,
    selector: JSON.parse(waiver.selector) as WaiverRow["selector"],
    reason: waiver.reason,
    maxError: waiver.maxError,
    expiresAt: time(waiver.expiresAt),
    expired: waiver.expiresAt <= Date.now(),
    askedBy: nameIn(names, waiver.askedById),
    askedAt: time(waiver.askedAt),
    decidedBy: nameIn(names, waiver.decidedById ?? null),
    decidedAt: timeOrNull(waiver.decidedAt ?? null),
    abilities: abilities(actor, ["waiver.decide"], { projectId: waiver.projectId }),
  };
}

async function answerFor(actor: Actor, waiver: Waiver): Promise<WaiverRow> {
  return presentWaiver(actor, waiver, await namesOf([waiver.askedById, waiver.decidedById ?? null]));
}

const ofWaiver: Locate = (_context, params) => projectOfWaiver(params.waiver ?? "");

function decisionRoute(decision: Decision, summary: string) {
  return defineRoute({
    method: "post",
    path: `/waivers/:waiver/${decision}`,
    summary,
    tag: "Waivers",
    auth: "person",
    can: "waiver.decide",
    locate: ofWaiver,
    response: waiverSchema,
    problems: ["conflict"],
    handler: async ({ context, actor, params }) =>
      answerFor(actor, await decideWaiver(context, actor, params.waiver, decision)),
  });
}

export const routes = [
  defineRoute({
    method: "get",
    path: "/projects/:project/waivers",
    summary: "Waivers, newest first",
    tag: "Waivers",
    auth: "caller",
    can: "waiver.read",
    query: z.strictObject({ ...pageQuery, state: z.enum(WAIVER_STATES).optional() }),
    response: page(waiverSchema),
    handler: async ({ actor, project, query }) => {
      const request = pageRequest(query);
      const rows = await listWaivers(project, query.state, request);
      const names = await namesOf(rows.flatMap((row) => [row.askedById, row.decidedById]));
      return pageOf(rows, request.limit, (row) => presentWaiver(actor, row, names));
    },
  }),
  defineRoute({
    method: "post",
    path: "/projects/:project/waivers",
    summary: "Ask for a waiver",
    description: "It holds from the moment that a lead approves it.",
    tag: "Waivers",
    auth: "person",
    can: "waiver.ask",
    body: createWaiver,
    response: waiverSchema,
    status: 201,
    handler: async ({ context, actor, project, body }) =>
      answerFor(actor, await askForWaiver(context, actor, project, body)),
  }),
  decisionRoute("approve", "Approve a waiver that was asked for"),
  decisionRoute("reject", "Reject a waiver that was asked for"),
  decisionRoute("end", "End an approved waiver before its time"),
];
