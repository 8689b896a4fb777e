import { User } from "../../db/models/User.ts";

/** Names of people by id, for rows that say who did something. */
export async function namesOf(ids: readonly (number | null)[]): Promise<ReadonlyMap<number, string>> {
  const wanted = [...new Set(ids.filter((id) => id !== null))];
  const users = wanted.length === 0 ? [] : await User.findAll({ where: { id: wanted }, attributes: ["id", "name"] });
  return new Map(users.map((user) => [user.id, user.name]));
}

export function nameIn(names: ReadonlyMap<number, string>, id: number | null): string | null {
  return id === null ? null : (names.get(id) ?? null);
}
