import { useMutation, useQuery, useQueryCache } from "@pinia/colada";
import type { BreakDetail, BreakRow } from "../../shared/schemas/break.ts";
import type { HistoryItem } from "../../shared/schemas/block.ts";
import { client } from "../api/client.ts";
import { everyPage } from "./everyPage.ts";
import type { Page } from "./everyPage.ts";
import { keys } from "./keys.ts";
import { projectPath } from "./projects.ts";

export const useBreaks = (project: () => string, state: () => string, lane: () => string | null) =>
  useQuery({
    key: () => keys.breakList(project(), state(), lane() ?? ""),
    query: ({ signal }) =>
      everyPage<BreakRow>(`${projectPath(project())}/breaks`, { query: { state: state(), lane: lane() }, signal }),
  });

const breakPath = (project: string, id: string) => `${projectPath(project)}/breaks/${encodeURIComponent(id)}`;

export const useBreak = (project: () => string, id: () => string, enabled: () => boolean = () => true) =>
  useQuery({
    key: () => keys.break(project(), id()),
    enabled,
    query: ({ signal }) => client.get<BreakDetail>(breakPath(project(), id()), { signal }),
  });

export interface EntryAddress {
  readonly blockId: string;
  readonly row: number;
  readonly column: number;
  readonly lane: string;
}

/** One entry over the commits of its lane, oldest first. */
export const useEntryHistory = (project: () => string, entry: () => EntryAddress | null) =>
  useQuery({
    key: () => {
      const e = entry();
      return keys.history(project(), e?.blockId ?? "", e?.row ?? -1, e?.column ?? -1, e?.lane ?? "");
    },
    enabled: () => entry() !== null,
    query: async ({ signal }) => {
      const { blockId, row, column, lane } = entry()!;
      const path = `${projectPath(project())}/blocks/${encodeURIComponent(blockId)}/entries/${row}/${column}/history`;
      return (await client.get<Page<HistoryItem>>(path, { query: { lane, limit: 500 }, signal })).items;
    },
  });

export function useBreakActions(project: () => string, id: () => string) {
  const cache = useQueryCache();
  const again = () => cache.invalidateQueries({ key: keys.breaks(project()) });
  const comment = useMutation({
    mutation: (body: string) => client.post<unknown>(`${breakPath(project(), id())}/comments`, { body }),
    onSettled: again,
  });
  const assign = useMutation({
    mutation: (assignee: string | null) => client.patch<unknown>(breakPath(project(), id()), { assignee }),
    onSettled: again,
  });
  return { comment, assign };
}
