import { z } from "zod";
import { page, pageQuery } from "../../../shared/schemas/common.ts";
import {
  createProject as createBody,
  patchProject as patchBody,
  project as projectSchema,
  projectRow,
} from "../../../shared/schemas/project.ts";
import type { Project } from "../../db/models/Project.ts";
import type { Actor } from "../../http/actor.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import { pageOf, pageRequest } from "../../http/paging.ts";
import { lanesOf } from "./lanes.ts";
import { presentProject, presentProjectRow } from "./present.ts";
import { createProject, listProjects, patchProject } from "./service.ts";
import { troubleOf } from "./trouble.ts";

async function answerFor(actor: Actor, project: Project) {
  const lanes = await lanesOf([project.id]);
  return presentProject(actor, project, lanes.get(project.id) ?? []);
}

export const routes = [
  defineRoute({
    method: "get",
    path: "/projects",
    summary: "Projects that you may know of, and where there is trouble",
    tag: "Projects",
    auth: "caller",
    can: "project.list",
    query: z.strictObject(pageQuery),
    response: page(projectRow),
    handler: async ({ context, actor, query }) => {
      const request = pageRequest(query);
      const rows = await listProjects(actor, request);
      const ids = rows.map((row) => row.id);
      const [lanes, trouble] = await Promise.all([lanesOf(ids), troubleOf(context, ids)]);
      const quiet = { openBreaks: 0, silentLanes: [], lastBuildAt: null, trace: [] };
      return pageOf(rows, request.limit, (row) =>
        presentProjectRow(actor, row, lanes.get(row.id) ?? [], trouble.get(row.id) ?? quiet),
      );
    },
  }),
  defineRoute({
    method: "post",
    path: "/projects",
    summary: "Open a project",
    tag: "Projects",
    auth: "person",
    can: "project.create",
    body: createBody,
    response: projectSchema,
    status: 201,
    problems: ["conflict"],
    handler: async ({ context, actor, body }) => answerFor(actor, await createProject(context, actor, body)),
  }),
  defineRoute({
    method: "get",
    path: "/projects/:project",
    summary: "A project, its settings, and what you may do in it",
    tag: "Projects",
    auth: "caller",
    can: "project.read",
    response: projectSchema,
    handler: async ({ actor, project }) => answerFor(actor, project),
  }),
  defineRoute({
    method: "patch",
    path: "/projects/:project",
    summary: "Change a project's settings",
    description:
      "Policy and tolerances are laid over what was set before; the list of tolerance rules replaces the one before.",
    tag: "Projects",
    auth: "person",
    can: "project.edit",
    body: patchBody,
    response: projectSchema,
    handler: async ({ context, actor, project, body }) =>
      answerFor(actor, await patchProject(context, actor, project, body)),
  }),
];
