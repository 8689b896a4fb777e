import { Op } from "sequelize";
import type { WhereOptions } from "sequelize";
import type { z } from "zod";
import type { createProject as createBody, patchProject as patchBody } from "../../../shared/schemas/project.ts";
import type { Context } from "../../context.ts";
import { Project } from "../../db/models/Project.ts";
import type { Caller } from "../../http/actor.ts";
import type { PageRequest } from "../../http/paging.ts";
import { Conflict } from "../../http/problem.ts";
import { retellCoverage } from "../../trace/settleProject.ts";
import { audit } from "../audit/audit.ts";

/** Projects that the actor may know of, in the order they were made; one more than the page holds. */
export function listProjects(actor: Caller, { limit, after }: PageRequest): Promise<Project[]> {
  const where: WhereOptions<Project>[] = after === null ? [] : [{ id: { [Op.gt]: after } }];
  if (actor.kind === "token") where.push({ id: actor.projectId });
  else if (!actor.admin) where.push({ id: [...actor.roles.keys()] });
  return Project.findAll({ where: { [Op.and]: where }, order: [["id", "ASC"]], limit: limit + 1 });
}

/** @throws Conflict where the slug is taken. */
export function createProject(context: Context, actor: Caller, wish: z.output<typeof createBody>): Promise<Project> {
  return context.db.write(async (writer) => {
    if ((await Project.count({ where: { slug: wish.slug }, transaction: writer.transaction })) > 0) {
      throw new Conflict(`There is a project ${wish.slug} already.`);
    }
    const project = await writer.create(Project, {
      slug: wish.slug,
      name: wish.name,
      defaultBranch: wish.defaultBranch,
      commitUrl: wish.commitUrl ?? null,
      createdAt: Date.now(),
    });
    await audit(writer, actor, "project.create", { projectId: project.id, target: wish.slug });
    return project;
  });
}

/** Policy and tolerances are laid over what was set before; what is not named stays. */
export function patchProject(
  context: Context,
  actor: Caller,
  project: Project,
  wish: z.output<typeof patchBody>,
): Promise<Project> {
  return context.db.write(async (writer) => {
    const before = await Project.findByPk(project.id, { transaction: writer.transaction, rejectOnEmpty: true });
    const laidOver = (stored: string, set: object | undefined) =>
      set === undefined ? stored : JSON.stringify({ ...(JSON.parse(stored) as object), ...set });
    await writer.update(
      Project,
      {
        name: wish.name ?? before.name,
        defaultBranch: wish.defaultBranch ?? before.defaultBranch,
        commitUrl: wish.commitUrl === undefined ? before.commitUrl : wish.commitUrl,
        policy: laidOver(before.policy, wish.policy),
        tolerances: laidOver(before.tolerances, wish.tolerances),
        checkLimit: wish.checkLimit ?? before.checkLimit,
        toleranceRules: wish.toleranceRules === undefined ? before.toleranceRules : JSON.stringify(wish.toleranceRules),
      },
      { id: project.id },
    );
    if (wish.checkLimit !== undefined && wish.checkLimit !== before.checkLimit) {
      await retellCoverage(writer, context.judge, project.id, wish.checkLimit);
    }
    await audit(writer, actor, "project.edit", { projectId: project.id, target: project.slug, detail: wish });
    return before.reload({ transaction: writer.transaction });
  });
}
