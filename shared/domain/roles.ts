/** Roles of a member in a project, weakest first. `admin` is a property of the person, instance-wide. */
export const ROLES = ["viewer", "developer", "lead"] as const;
export type Role = (typeof ROLES)[number];

/** Scopes of an API token. */
export const SCOPES = ["post", "read"] as const;
export type Scope = (typeof SCOPES)[number];

/** True where `role` may do what `needed` may do. */
export function roleAtLeast(role: Role, needed: Role): boolean {
  return ROLES.indexOf(role) >= ROLES.indexOf(needed);
}
