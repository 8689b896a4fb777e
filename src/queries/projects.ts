import { useMutation, useQuery, useQueryCache } from "@pinia/colada";
import type { Project, ProjectRow } from "../../shared/schemas/project.ts";
import type { Overview } from "../../shared/schemas/project.ts";
import type { Strip } from "../../shared/schemas/commit.ts";
import { client } from "../api/client.ts";
import { everyPage } from "./everyPage.ts";
import { keys } from "./keys.ts";

export const projectPath = (project: string) => `/projects/${encodeURIComponent(project)}`;

export const useProjects = () =>
  useQuery({ key: keys.projects(), query: ({ signal }) => everyPage<ProjectRow>("/projects", { signal }) });

export const useProject = (project: () => string) =>
  useQuery({
    key: () => keys.project(project()),
    query: ({ signal }) => client.get<Project>(projectPath(project()), { signal }),
  });

/** The strip of a lane; waits until the lane is known. */
export const useStrip = (project: () => string, lane: () => string | null) =>
  useQuery({
    key: () => keys.strip(project(), lane() ?? ""),
    enabled: () => lane() !== null,
    query: ({ signal }) => client.get<Strip>(`${projectPath(project())}/strip`, { query: { lane: lane() }, signal }),
  });

/** The overview of one commit; the one before stays until the new one came, so that the page does not jump. */
export const useOverview = (project: () => string, lane: () => string | null, at: () => string | null) =>
  useQuery({
    key: () => keys.overview(project(), lane() ?? "", at() ?? ""),
    enabled: () => lane() !== null,
    placeholderData: (previous: Overview | undefined) => previous,
    query: ({ signal }) =>
      client.get<Overview>(`${projectPath(project())}/summary`, { query: { lane: lane(), at: at() }, signal }),
  });

export function useCreateProject() {
  const cache = useQueryCache();
  return useMutation({
    mutation: (body: { slug: string; name: string; defaultBranch: string }) => client.post<Project>("/projects", body),
    onSettled: () => cache.invalidateQueries({ key: keys.projects() }),
  });
}
