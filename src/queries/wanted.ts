import { useMutation, useQuery, useQueryCache } from "@pinia/colada";
import type { Wanted } from "../../shared/schemas/wanted.ts";
import { client } from "../api/client.ts";
import { keys } from "./keys.ts";
import { projectPath } from "./projects.ts";

/** What a scheduler should build next in a lane. */
export const useWanted = (project: () => string, lane: () => string | null) =>
  useQuery({
    key: () => keys.wanted(project(), lane() ?? ""),
    enabled: () => lane() !== null,
    query: ({ signal }) => client.get<Wanted>(`${projectPath(project())}/wanted`, { query: { lane: lane() }, signal }),
  });

export function useAskForBuild(project: () => string) {
  const cache = useQueryCache();
  return useMutation({
    mutation: (body: { commit: string; lane: string }) =>
      client.post<unknown>(`${projectPath(project())}/wanted`, body),
    onSettled: (_data, _error, body) => cache.invalidateQueries({ key: keys.wanted(project(), body.lane) }),
  });
}
