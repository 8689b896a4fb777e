import type { Role, Scope } from "../../shared/domain/roles.ts";

/** Nobody in particular. */
export interface Anyone {
  readonly kind: "anyone";
}

/** A person with a session. */
export interface PersonActor {
  readonly kind: "person";
  readonly id: number;
  readonly name: string;
  readonly email: string;
  readonly admin: boolean;
  readonly sessionId: string;
  /** When the session ends by itself, milliseconds since 1970. */
  readonly sessionEndsAt: number;
  /** Roles by project. */
  readonly roles: ReadonlyMap<number, Role>;
}

/** A CI job with a token of one project. */
export interface TokenActor {
  readonly kind: "token";
  readonly id: number;
  readonly name: string;
  readonly projectId: number;
  readonly scopes: readonly Scope[];
}

export type Caller = PersonActor | TokenActor;
export type Actor = Anyone | Caller;
export const ANYONE: Anyone = { kind: "anyone" };

/** Role of the caller in a project; null for tokens and for whoever is no member. */
export function roleOf(actor: Actor, projectId: number): Role | null {
  return actor.kind === "person" ? (actor.roles.get(projectId) ?? null) : null;
}

/** True where the caller may know that the project exists. */
export function mayKnow(actor: Actor, projectId: number): boolean {
  if (actor.kind === "person") return actor.admin || actor.roles.has(projectId);
  return actor.kind === "token" && actor.projectId === projectId;
}

/** A key for counting and logging. */
export function actorKey(actor: Caller): string {
  return `${actor.kind}:${actor.id}`;
}
