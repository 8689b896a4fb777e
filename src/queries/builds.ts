import { useQuery } from "@pinia/colada";
import type { BlockDetail, BlockRow } from "../../shared/schemas/block.ts";
import type { BuildRow } from "../../shared/schemas/build.ts";
import type { Gate } from "../../shared/schemas/gate.ts";
import { client } from "../api/client.ts";
import { everyPage } from "./everyPage.ts";
import { keys } from "./keys.ts";
import { projectPath } from "./projects.ts";

export interface BuildFilter {
  readonly lane?: string | null;
  readonly branch?: string | null;
  readonly commit?: string | null;
}

/** Newest first, at most 500: what a person looks through. */
export const useBuilds = (project: () => string, filter: () => BuildFilter) =>
  useQuery({
    key: () => keys.builds(project(), JSON.stringify(filter())),
    query: ({ signal }) =>
      everyPage<BuildRow>(`${projectPath(project())}/builds`, { query: { ...filter() }, signal }, 500),
  });

const buildPath = (project: string, id: string) => `${projectPath(project)}/builds/${encodeURIComponent(id)}`;

export const useBuild = (project: () => string, id: () => string) =>
  useQuery({
    key: () => keys.build(project(), id()),
    query: ({ signal }) => client.get<BuildRow>(buildPath(project(), id()), { signal }),
  });

export const useBlocks = (project: () => string, build: () => string) =>
  useQuery({
    key: () => keys.blocks(project(), build()),
    query: ({ signal }) => everyPage<BlockRow>(`${buildPath(project(), build())}/blocks`, { signal }),
  });

/** A block with its numbers, as base64 planes at any size. */
export const useBlock = (project: () => string, build: () => string, block: () => string) =>
  useQuery({
    key: () => keys.block(project(), build(), block()),
    placeholderData: (previous: BlockDetail | undefined) => previous,
    query: ({ signal }) =>
      client.get<BlockDetail>(`${buildPath(project(), build())}/blocks/${encodeURIComponent(block())}`, {
        query: { format: "f64le" },
        signal,
      }),
  });

export type BlockSides = Pick<BlockDetail, "output" | "input">;

/** Names of the rows and columns of a few blocks, by block: asked for with a window of one entry, so that it stays small. */
export const useBlockSides = (project: () => string, build: () => string | null, blocks: () => readonly string[]) =>
  useQuery({
    key: () => keys.names(project(), build() ?? "", blocks().join()),
    enabled: () => build() !== null && blocks().length > 0,
    query: async ({ signal }) => {
      const sides = blocks().map(async (block): Promise<[string, BlockSides]> => {
        const path = `${buildPath(project(), build() ?? "")}/blocks/${encodeURIComponent(block)}`;
        return [block, await client.get<BlockDetail>(path, { query: { rows: "0:1", columns: "0:1" }, signal })];
      });
      return new Map(await Promise.all(sides));
    },
  });

export const useGate = (project: () => string, lane: () => string | null, commit: () => string | null) =>
  useQuery({
    key: () => keys.gate(project(), lane() ?? "", commit() ?? ""),
    enabled: () => lane() !== null && commit() !== null,
    query: ({ signal }) =>
      client.get<Gate>(`${projectPath(project())}/gate`, { query: { lane: lane(), commit: commit() }, signal }),
  });
