import type { Actor } from "../http/actor.ts";
import type { Rule, Target } from "../http/policy.ts";
import { auditPolicy } from "./audit/policy.ts";
import { baselinePolicy } from "./baselines/policy.ts";
import { breakPolicy } from "./breaks/policy.ts";
import { buildPolicy } from "./builds/policy.ts";
import { memberPolicy } from "./members/policy.ts";
import { peoplePolicy } from "./people/policy.ts";
import { projectPolicy } from "./projects/policy.ts";
import { tokenPolicy } from "./tokens/policy.ts";
import { waiverPolicy } from "./waivers/policy.ts";

/** Who may do what, all of it. */
export const POLICIES = {
  ...auditPolicy,
  ...baselinePolicy,
  ...breakPolicy,
  ...buildPolicy,
  ...memberPolicy,
  ...peoplePolicy,
  ...projectPolicy,
  ...tokenPolicy,
  ...waiverPolicy,
} as const;

export type Action = keyof typeof POLICIES;

export function can(actor: Actor, action: Action, target: Target = {}): boolean {
  const rule: Rule | undefined = Object.hasOwn(POLICIES, action) ? POLICIES[action] : undefined;
  return rule !== undefined && rule(actor, target);
}

/** Sent with a row, so that pages show only what will work. */
export function abilities(actor: Actor, actions: readonly Action[], target: Target = {}): Record<string, boolean> {
  return Object.fromEntries(actions.map((action) => [action, can(actor, action, target)]));
}
