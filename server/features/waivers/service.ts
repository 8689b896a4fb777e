import { Op } from "sequelize";
import type { z } from "zod";
import type { WaiverState } from "../../../shared/domain/vocabulary.ts";
import type { createWaiver } from "../../../shared/schemas/waiver.ts";
import type { Context } from "../../context.ts";
import { Project } from "../../db/models/Project.ts";
import { Waiver } from "../../db/models/Waiver.ts";
import type { PersonActor } from "../../http/actor.ts";
import type { PageRequest } from "../../http/paging.ts";
import { Conflict, NotFound } from "../../http/problem.ts";
import { timeToCome } from "../../http/validate.ts";
import { audit } from "../audit/audit.ts";

/** Newest first, one more than the page holds. */
export function listWaivers(
  project: Project,
  state: WaiverState | undefined,
  { limit, after }: PageRequest,
): Promise<Waiver[]> {
  return Waiver.findAll({
    where: {
      projectId: project.id,
      ...(state === undefined ? {} : { state }),
      ...(after === null ? {} : { id: { [Op.lt]: after } }),
    },
    order: [["id", "DESC"]],
    limit: limit + 1,
  });
}

/** @throws Invalid where it would have ended already. */
export function askForWaiver(
  context: Context,
  actor: PersonActor,
  project: Project,
  wish: z.output<typeof createWaiver>,
): Promise<Waiver> {
  const now = Date.now();
  const expiresAt = timeToCome(wish.expiresAt, "#/expiresAt", now);
  return context.db.write(async (writer) => {
    const waiver = await writer.create(Waiver, {
      projectId: project.id,
      state: "asked",
      selector: JSON.stringify(wish.selector),
      reason: wish.reason,
      maxError: wish.maxError,
      expiresAt,
      askedById: actor.id,
      askedAt: now,
    });
    const detail = { ...wish };
    await audit(writer, actor, "waiver.ask", { projectId: project.id, target: `waiver ${waiver.id}`, detail });
    return waiver;
  });
}

/** The project that a waiver belongs to; null where there is no such waiver. */
export async function projectOfWaiver(id: string): Promise<Project | null> {
  const waiver = await Waiver.findByPk(id);
  return waiver === null ? null : Project.findByPk(waiver.projectId);
}

const STEPS = {
  approve: { from: "asked", to: "approved" },
  reject: { from: "asked", to: "rejected" },
  end: { from: "approved", to: "ended" },
} as const satisfies Record<string, { from: WaiverState; to: WaiverState }>;
export type Decision = keyof typeof STEPS;

/** @throws NotFound; Conflict where the waiver is not in the state that this starts from. */
export function decideWaiver(context: Context, actor: PersonActor, id: string, decision: Decision): Promise<Waiver> {
  const { from, to } = STEPS[decision];
  return context.db.write(async (writer) => {
    const { transaction } = writer;
    const waiver = await Waiver.findByPk(id, { transaction });
    if (waiver === null) throw new NotFound();
    if (waiver.state !== from)
      throw new Conflict(`The waiver is ${waiver.state}; only one that is ${from} can be ${to}.`);
    await writer.update(Waiver, { state: to, decidedById: actor.id, decidedAt: Date.now() }, { id: waiver.id });
    await audit(writer, actor, `waiver.${decision}`, { projectId: waiver.projectId, target: `waiver ${waiver.id}` });
    return waiver.reload({ transaction });
  });
}
