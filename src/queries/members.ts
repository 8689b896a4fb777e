import { useMutation, useQuery, useQueryCache } from "@pinia/colada";
import type { z } from "zod";
import type { Role } from "../../shared/domain/roles.ts";
import type { addedMember, Member } from "../../shared/schemas/people.ts";
import { client } from "../api/client.ts";
import { everyPage } from "./everyPage.ts";
import { keys } from "./keys.ts";
import { projectPath } from "./projects.ts";

export type AddedMember = z.infer<typeof addedMember>;

export const useMembers = (project: () => string, enabled: () => boolean = () => true) =>
  useQuery({
    key: () => keys.members(project()),
    enabled,
    query: ({ signal }) => everyPage<Member>(`${projectPath(project())}/members`, { signal }),
  });

export function useMemberActions(project: () => string) {
  const cache = useQueryCache();
  const onSettled = () => cache.invalidateQueries({ key: keys.members(project()) });
  const path = (person: string) => `${projectPath(project())}/members/${encodeURIComponent(person)}`;
  const invite = useMutation({
    mutation: (body: { email: string; role: Role }) =>
      client.post<AddedMember>(`${projectPath(project())}/invitations`, body),
    onSettled,
  });
  const setRole = useMutation({
    mutation: ({ person, role }: { person: string; role: Role }) => client.patch<unknown>(path(person), { role }),
    onSettled,
  });
  const remove = useMutation({ mutation: (person: string) => client.remove(path(person)), onSettled });
  return { invite, setRole, remove };
}
