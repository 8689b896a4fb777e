import { Op } from "sequelize";
import { z } from "zod";
import { auditEntry } from "../../../shared/schemas/audit.ts";
import { page, pageQuery } from "../../../shared/schemas/common.ts";
import { AuditEntry } from "../../db/models/AuditEntry.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import { pageOf, pageRequest } from "../../http/paging.ts";
import { time } from "../../http/present.ts";

function presentEntry(entry: AuditEntry): z.input<typeof auditEntry> {
  return {
    id: String(entry.id),
    at: time(entry.at),
    actor: { kind: entry.actorKind, name: entry.actorName },
    action: entry.action,
    target: entry.target,
    detail: JSON.parse(entry.detail) as Record<string, unknown>,
  };
}

export const routes = [
  defineRoute({
    method: "get",
    path: "/projects/:project/audit",
    summary: "Who did what in the project, newest first",
    tag: "Audit",
    auth: "person",
    can: "audit.read",
    query: z.strictObject(pageQuery),
    response: page(auditEntry),
    handler: async ({ project, query }) => {
      const { limit, after } = pageRequest(query);
      const rows = await AuditEntry.findAll({
        where: { projectId: project.id, ...(after === null ? {} : { id: { [Op.lt]: after } }) },
        order: [["id", "DESC"]],
        limit: limit + 1,
      });
      return pageOf(rows, limit, presentEntry);
    },
  }),
];
