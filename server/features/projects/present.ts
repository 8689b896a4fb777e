import type { Project as ProjectAnswer, ProjectRow } from "../../../shared/schemas/project.ts";
import type { Project } from "../../db/models/Project.ts";
import { roleOf } from "../../http/actor.ts";
import type { Actor } from "../../http/actor.ts";
import { abilities } from "../policies.ts";
import type { Action } from "../policies.ts";
import { checkLimitOf, policyOf, toleranceRulesOf, tolerancesOf } from "./settings.ts";
import type { Trouble } from "./trouble.ts";

const SHOWN_ACTIONS = [
  "audit.read",
  "break.assign",
  "break.comment",
  "build.close",
  "member.manage",
  "project.edit",
  "token.manage",
  "waiver.ask",
  "waiver.decide",
  "wanted.ask",
] as const satisfies readonly Action[];

export function presentProject(actor: Actor, project: Project, lanes: readonly string[]): ProjectAnswer {
  return {
    id: String(project.id),
    slug: project.slug,
    name: project.name,
    defaultBranch: project.defaultBranch,
    commitUrl: project.commitUrl ?? null,
    policy: policyOf(project),
    tolerances: tolerancesOf(project),
    checkLimit: checkLimitOf(project),
    toleranceRules: toleranceRulesOf(project).map(({ selector, rtol, floorRel, floorAbs }) => ({
      selector,
      rtol,
      floorRel,
      floorAbs,
    })),
    lanes: [...lanes],
    role: roleOf(actor, project.id),
    abilities: abilities(actor, SHOWN_ACTIONS, { projectId: project.id }),
  };
}

export function presentProjectRow(
  actor: Actor,
  project: Project,
  lanes: readonly string[],
  trouble: Trouble,
): ProjectRow {
  return {
    id: String(project.id),
    slug: project.slug,
    name: project.name,
    role: roleOf(actor, project.id),
    lanes: [...lanes],
    openBreaks: trouble.openBreaks,
    silentLanes: trouble.silentLanes,
    lastBuildAt: trouble.lastBuildAt,
    trace: trouble.trace,
  };
}
