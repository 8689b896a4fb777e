import { Op } from "sequelize";
import type { z } from "zod";
import { selects } from "../../../shared/domain/selector.ts";
import type { acceptBaseline as acceptBody } from "../../../shared/schemas/baseline.ts";
import type { Context } from "../../context.ts";
import { Baseline } from "../../db/models/Baseline.ts";
import type { Project } from "../../db/models/Project.ts";
import type { PersonActor } from "../../http/actor.ts";
import type { PageRequest } from "../../http/paging.ts";
import { Invalid } from "../../http/problem.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import { retellDrifts } from "../../trace/settleProject.ts";
import { audit } from "../audit/audit.ts";

/** Newest first, one more than the page holds. */
export function listBaselines(project: Project, { limit, after }: PageRequest): Promise<Baseline[]> {
  return Baseline.findAll({
    where: { projectId: project.id, ...(after === null ? {} : { id: { [Op.lt]: after } }) },
    order: [["id", "DESC"]],
    limit: limit + 1,
  });
}

/**
 * Lets drift of the selected entries be measured from a commit on: their climbs end there. What was told before stays.
 * @throws Invalid for a commit that the default branch does not contain: drift is followed along it.
 */
export function acceptBaseline(
  context: Context,
  actor: PersonActor,
  project: Project,
  wish: z.output<typeof acceptBody>,
): Promise<Baseline> {
  return context.db.write(async (writer) => {
    const { mainline } = await loadGraph(writer, project.id);
    if (!mainline.has(wish.commit)) {
      throw new Invalid([
        { pointer: "#/commit", detail: `is no commit of the default branch, ${project.defaultBranch}` },
      ]);
    }
    const accepted = await writer.create(Baseline, {
      projectId: project.id,
      selector: JSON.stringify(wish.selector),
      sha: wish.commit,
      reason: wish.reason,
      acceptedById: actor.id,
      acceptedAt: Date.now(),
    });
    await retellDrifts(writer, context.judge, project.id, (block, lane) => selects(wish.selector, block, lane));
    const detail = { ...wish };
    await audit(writer, actor, "baseline.accept", { projectId: project.id, target: `baseline ${accepted.id}`, detail });
    return accepted;
  });
}
