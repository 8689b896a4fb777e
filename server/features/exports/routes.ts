import { z } from "zod";
import { exportDocument, exportQuery } from "../../../shared/schemas/export.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { timeOrNull } from "../../http/present.ts";
import { streamed } from "../../http/reply.ts";
import { baselinePages, waiverPages } from "./decisionPages.ts";
import { breakPages } from "./breakPages.ts";
import { buildPages } from "./buildPages.ts";
import { csvChunks, jsonChunks } from "./chunks.ts";
import type { ExportPages } from "./chunks.ts";
import type { ExportScope } from "./scope.ts";

const CSV = "text/csv; charset=utf-8; header=present";

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/export",
    summary: "The record, streamed as JSON or as a table",
    description: [
      "`from` and `to` (exclusive) are dates or times: of builds and breaks that of the commit, else of arrival; of",
      "waivers when they were asked for, of baselines when they were accepted. `kind` is the section wanted: JSON has",
      "all of them without it, a table has `builds`, one row for each block of each complete build. Waivers and",
      "baselines of a `lane` are those whose selector covers it.",
      "",
      "Tables are CSV by RFC 4180 with a header and CRLF, numbers with all their digits, NaN and infinities as words,",
      "lists separated by spaces. A text that a spreadsheet would run has an apostrophe before it. The last column of",
      "the first row is the caution that belongs to every result.",
    ].join("\n"),
    tag: "Exports",
    auth: "caller",
    can: "project.read",
    query: exportQuery,
    response: exportDocument,
    streams: { "text/csv": z.string() },
    handler: async ({ context, project, query }) => {
      const { format = "json", kind, lane = null } = query;
      const from = query.from === undefined ? null : Date.parse(query.from);
      const to = query.to === undefined ? null : Date.parse(query.to);
      const scope: ExportScope = { projectId: project.id, lane, from, to, now: Date.now() };
      const pages: ExportPages = {
        builds: () => buildPages(context.db, scope),
        breaks: () => breakPages(context.db, scope),
        waivers: () => waiverPages(context.db, scope),
        baselines: () => baselinePages(context.db, scope),
      };
      const name = `${project.slug}-${kind ?? (format === "csv" ? "builds" : "record")}.${format}`;
      const headers = { "Content-Disposition": `attachment; filename="${name}"` };
      if (format === "csv") return streamed(CSV, csvChunks(pages, kind ?? "builds"), headers);
      const head = { project: project.slug, lane, from: timeOrNull(from), to: timeOrNull(to) };
      return streamed("application/json", jsonChunks(head, pages, kind && [kind]), headers);
    },
  }),
];
