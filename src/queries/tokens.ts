import { useMutation, useQuery, useQueryCache } from "@pinia/colada";
import type { z } from "zod";
import type { createdToken, createToken, TokenRow } from "../../shared/schemas/token.ts";
import { client } from "../api/client.ts";
import { everyPage } from "./everyPage.ts";
import { keys } from "./keys.ts";
import { projectPath } from "./projects.ts";

export type CreatedToken = z.infer<typeof createdToken>;

export const useTokens = (project: () => string) =>
  useQuery({
    key: () => keys.tokens(project()),
    query: ({ signal }) => everyPage<TokenRow>(`${projectPath(project())}/tokens`, { signal }),
  });

export function useTokenActions(project: () => string) {
  const cache = useQueryCache();
  const onSettled = () => cache.invalidateQueries({ key: keys.tokens(project()) });
  const create = useMutation({
    mutation: (body: z.input<typeof createToken>) =>
      client.post<CreatedToken>(`${projectPath(project())}/tokens`, body),
    onSettled,
  });
  const revoke = useMutation({
    mutation: (id: string) => client.remove(`${projectPath(project())}/tokens/${encodeURIComponent(id)}`),
    onSettled,
  });
  return { create, revoke };
}
