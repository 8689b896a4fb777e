import { DEFAULT_TOLERANCES } from "../../../shared/domain/tolerances.ts";
import type { ToleranceRule, Tolerances } from "../../../shared/domain/tolerances.ts";
import { DEFAULT_GATE_POLICY } from "../../../shared/domain/vocabulary.ts";
import type { GatePolicy } from "../../../shared/domain/vocabulary.ts";
import type { Project } from "../../db/models/Project.ts";

/** What the project's leads set, over the defaults. */
export function policyOf(project: Pick<Project, "policy">): GatePolicy {
  return { ...DEFAULT_GATE_POLICY, ...(JSON.parse(project.policy) as Partial<GatePolicy>) };
}

export function tolerancesOf(project: Pick<Project, "tolerances">): Tolerances {
  return { ...DEFAULT_TOLERANCES, ...(JSON.parse(project.tolerances) as Partial<Tolerances>) };
}

export function toleranceRulesOf(project: Pick<Project, "toleranceRules">): ToleranceRule[] {
  return JSON.parse(project.toleranceRules) as ToleranceRule[];
}

/** Builds after which an entry that was not checked again counts as unreferenced. */
export function checkLimitOf(project: Pick<Project, "checkLimit">): number {
  return project.checkLimit;
}
