import { roleAtLeast } from "../../shared/domain/roles.ts";
import type { Role, Scope } from "../../shared/domain/roles.ts";
import type { Actor } from "./actor.ts";
import { roleOf } from "./actor.ts";

/** What an action is done to. */
export interface Target {
  /** The project it belongs to; missing for what belongs to the instance. */
  readonly projectId?: number;
}

/** One line of a policy table. Whatever no line allows is denied. */
export type Rule = (actor: Actor, target: Target) => boolean;
export type PolicyTable = Readonly<Record<string, Rule>>;

/** A member of the target's project with at least this role, or an administrator. */
export const role =
  (needed: Role): Rule =>
  (actor, { projectId }) => {
    if (actor.kind !== "person" || projectId === undefined) return false;
    const held = roleOf(actor, projectId);
    return actor.admin || (held !== null && roleAtLeast(held, needed));
  };

/** A token of the target's project with this scope. */
export const scope =
  (needed: Scope): Rule =>
  (actor, { projectId }) =>
    actor.kind === "token" && actor.projectId === projectId && actor.scopes.includes(needed);

export const administrator: Rule = (actor) => actor.kind === "person" && actor.admin;
export const anyCaller: Rule = (actor) => actor.kind !== "anyone";

export const either =
  (...rules: readonly Rule[]): Rule =>
  (actor, target) =>
    rules.some((rule) => rule(actor, target));
