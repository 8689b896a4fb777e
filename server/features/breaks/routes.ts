import { breakDetail, breakRow, breaksQuery, comment, patchBreak, postComment } from "../../../shared/schemas/break.ts";
import type { BreakDetail } from "../../../shared/schemas/break.ts";
import { page } from "../../../shared/schemas/common.ts";
import type { Context } from "../../context.ts";
import type { Project } from "../../db/models/Project.ts";
import type { Actor } from "../../http/actor.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { pageOf, pageRequest } from "../../http/paging.ts";
import { loadCommitFacts } from "../../record/commitFacts.ts";
import type { StoredTrace } from "../../trace/storedTrace.ts";
import { urlsOf } from "../builds/urls.ts";
import { numericId } from "../numericId.ts";
import { loadBreakBlocks, loadWorstEntries } from "./loadBreakEntries.ts";
import { loadBreaks, loadSignatures } from "./loadBreaks.ts";
import { presentBreak, presentBreakRow, presentComment } from "./present.ts";
import { assignBreak, commentOnBreak, existingBreak, loadComments } from "./service.ts";
import { loadActiveWaivers, loadWaived } from "./waived.ts";

/** Entries told of one break; `entryCount` tells how many there are. */
const MOST_ENTRIES = 200;

async function answerFor(context: Context, actor: Actor, project: Project, breakId: number): Promise<BreakDetail> {
  const { db, config } = context;
  const one = await existingBreak(db, project.id, breakId);
  const blocks = await loadBreakBlocks(db, one.id);
  const suspects = (JSON.parse(one.trace) as StoredTrace).suspects.map(({ sha }) => sha);
  const waived = await loadWaived(db, [one], await loadActiveWaivers(db, project.id, Date.now()));
  const parts = {
    entries: await loadWorstEntries(db, blocks, one.onsetBuildId, one.lastGoodBuildId, MOST_ENTRIES),
    suspects: await loadCommitFacts(db, project.id, suspects),
    comments: await loadComments(db, one.id),
    signatures: (await loadSignatures(db, [one.id])).get(one.id) ?? [],
    waiver: waived.get(one.id) ?? null,
  };
  const urls = urlsOf(config.publicUrl, project.slug);
  return presentBreak(one, parts, { projectId: project.id, commitUrl: project.commitUrl ?? null, urls, actor });
}

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/breaks",
    summary: "Breaks, newest first",
    description: "`waived`: open, and every entry is within the bound of an approved waiver that has not ended.",
    tag: "Breaks",
    auth: "caller",
    can: "break.read",
    query: breaksQuery,
    response: page(breakRow),
    handler: async ({ context, project, query }) => {
      const { db, config } = context;
      const { after, limit } = pageRequest(query);
      const state = query.state ?? "open";
      const stored = state === "all" ? null : state === "waived" ? "open" : state;
      const breaks = await loadBreaks(db, project.id, { lane: query.lane ?? null, state: stored });
      const waived = await loadWaived(db, breaks, await loadActiveWaivers(db, project.id, Date.now()));
      const chosen = breaks.filter(
        (one) => state === "all" || state === "repaired" || waived.has(one.id) === (state === "waived"),
      );
      const rest = chosen.filter((one) => after === null || one.id < after).slice(0, limit + 1);
      const signatures = await loadSignatures(
        db,
        rest.map((one) => one.id),
      );
      const urls = urlsOf(config.publicUrl, project.slug);
      return pageOf(rest, limit, (one) =>
        presentBreakRow(one, { waived: waived.has(one.id), signatures: signatures.get(one.id) ?? [] }, urls),
      );
    },
  }),
  defineRoute({
    method: "get",
    path: "/projects/:project/breaks/:break",
    summary: "One break: its suspects, its worst entries, what to build next",
    description:
      "At most 200 entries, worst first, as they were at the onset. A break that later builds showed to be part of another one is answered with that other one.",
    tag: "Breaks",
    auth: "caller",
    can: "break.read",
    params: { break: numericId },
    response: breakDetail,
    handler: ({ context, actor, project, params }) => answerFor(context, actor, project, params.break),
  }),
  defineRoute({
    method: "patch",
    path: "/projects/:project/breaks/:break",
    summary: "Say who sees to a break",
    tag: "Breaks",
    auth: "person",
    can: "break.assign",
    params: { break: numericId },
    body: patchBreak,
    response: breakDetail,
    handler: async ({ context, actor, project, params, body }) => {
      const assignee = body.assignee === null ? null : numericId.parse(body.assignee);
      await assignBreak(context, actor, project, params.break, assignee);
      return answerFor(context, actor, project, params.break);
    },
  }),
  defineRoute({
    method: "post",
    path: "/projects/:project/breaks/:break/comments",
    summary: "Say something of a break",
    tag: "Breaks",
    auth: "person",
    can: "break.comment",
    params: { break: numericId },
    body: postComment,
    status: 201,
    response: comment,
    handler: async ({ context, actor, project, params, body }) =>
      presentComment(await commentOnBreak(context, actor, project, params.break, body.body)),
  }),
];
