import { setImmediate } from "node:timers/promises";
import { groupBy } from "../../../shared/domain/groupBy.ts";
import { pathClue } from "../../../shared/history/pathClue.ts";
import type { Reader } from "../../db/reader.ts";
import { loadCommitFacts } from "../../record/commitFacts.ts";
import type { BlockChecks } from "./blockChecks.ts";
import type { LaneLine } from "./laneLine.ts";
import type { PlannedBlock } from "./loadChecks.ts";

/** The strongest hint that a block changed since a commit. */
export interface ChangeClue {
  readonly odds: number;
  readonly why: string;
  readonly sha: string;
}

/** Commits that are looked through at most, and paths compared with the sources of a model, newest first. */
const MOST_COMMITS = 500;
const MOST_PATHS = 10_000;

interface Change {
  readonly sha: string;
  /** Place in the line. */
  readonly place: number;
  readonly paths: readonly string[];
}

/** What the commits after a place in the line changed of a block: the strongest clue, or null where there is none. */
export type ClueSince = (blockId: number, place: number) => ChangeClue | null;

/**
 * Holds the paths that commits changed since the blocks' last checks against the blocks' sources. Blocks of one model
 * and the same sources share the work; the newest commits come first, so that a long history costs no more.
 */
export async function loadChangeClues(
  reader: Reader,
  projectId: number,
  { commits }: LaneLine,
  blocks: readonly PlannedBlock[],
  checks: ReadonlyMap<number, BlockChecks>,
): Promise<ClueSince> {
  const placeOf = new Map(commits.map((sha, place) => [sha, place]));
  const oldest = (block: PlannedBlock) => {
    const last = (checks.get(block.blockId) as BlockChecks).checks.at(-1);
    return last === undefined ? commits.length : (placeOf.get(last.sha) ?? commits.length);
  };
  const first = Math.max(
    commits.length - MOST_COMMITS,
    blocks.reduce((least, block) => Math.min(least, oldest(block)), commits.length) + 1,
  );
  const changes = await loadChanges(reader, projectId, commits, Math.max(0, first));
  const clues = new Map<number, readonly (ChangeClue & { readonly place: number })[]>();
  let paths = MOST_PATHS;
  for (const members of groupBy(blocks, (block) => JSON.stringify([block.model, block.sources])).values()) {
    const since = members.reduce((least, block) => Math.min(least, oldest(block)), commits.length);
    const wanted = changes.filter((change) => change.place > since);
    const found = cluesOf(members[0], wanted, paths);
    paths -= found.compared;
    for (const block of members) clues.set(block.blockId, found.clues);
    await setImmediate();
  }
  return (blockId, place) => {
    const later = (clues.get(blockId) ?? []).filter((clue) => clue.place > place);
    return later.reduce<ChangeClue | null>((a, b) => (a === null || b.odds > a.odds ? b : a), null);
  };
}

/** Newest first. */
async function loadChanges(
  reader: Reader,
  projectId: number,
  commits: readonly string[],
  first: number,
): Promise<Change[]> {
  const facts = await loadCommitFacts(reader, projectId, commits.slice(first));
  const changes = commits.slice(first).map((sha, at) => {
    return { sha, place: first + at, paths: facts.get(sha)?.changedPaths ?? [] };
  });
  return changes.reverse();
}

function cluesOf({ model, sources }: PlannedBlock, changes: readonly Change[], most: number) {
  const clues: (ChangeClue & { place: number })[] = [];
  let compared = 0;
  for (const { sha, place, paths } of changes) {
    if (compared + paths.length > most) break;
    compared += paths.length;
    const found = paths.flatMap((path) => pathClue(path, { models: [model], sources }) ?? []);
    const best = found.reduce<(typeof found)[number] | null>((a, b) => (a === null || b.odds > a.odds ? b : a), null);
    if (best !== null) clues.push({ ...best, sha, place });
  }
  return { clues, compared };
}
