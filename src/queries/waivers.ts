import { useMutation, useQueryCache } from "@pinia/colada";
import type { z } from "zod";
import type { createWaiver } from "../../shared/schemas/waiver.ts";
import { client } from "../api/client.ts";
import { keys } from "./keys.ts";
import { projectPath } from "./projects.ts";

export type WaiverRequest = z.input<typeof createWaiver>;

export function useAskForWaiver(project: () => string) {
  const cache = useQueryCache();
  return useMutation({
    mutation: (body: WaiverRequest) => client.post<unknown>(`${projectPath(project())}/waivers`, body),
    onSettled: () => cache.invalidateQueries({ key: keys.project(project()) }),
  });
}
