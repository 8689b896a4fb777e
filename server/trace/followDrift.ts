import type { Writer } from "../db/write.ts";
import type { DriftStep } from "../ingest/judgeDrift.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import { loadTiles } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import {
  allPartTiles,
  driftTiles,
  entriesInPart,
  PART_ENTRIES,
  samePart,
  storeDriftPart,
  storeHappenings,
} from "./driftParts.ts";
import type { DriftKey, DriftPart } from "./driftParts.ts";

/** One build of a block on the chain. */
export interface ChainItem {
  readonly buildId: number;
  readonly snapshot: SnapshotPlanes;
  /** Flat indices of the entries whose baseline begins here; null for none. */
  readonly restart: Uint32Array | "all" | null;
}

/** What waits to be gone through by the judge. */
interface Waiting extends Omit<DriftStep, "tiles"> {
  readonly snapshot: SnapshotPlanes | null;
}

/** Numbers that one task may hold, and steps. */
const MOST_ENTRIES = 16 * PART_ENTRIES;
const MOST_STEPS = 64;

/**
 * Follows one part of a block through further builds of its chain. Builds that repeat numbers from which nothing can
 * follow are only counted.
 */
export async function followPart(
  w: Writer,
  judge: JudgePool,
  key: DriftKey,
  part: number,
  known: DriftPart | null,
  items: readonly ChainItem[],
  snapshots: ReadonlyMap<number, SnapshotPlanes>,
): Promise<void> {
  let now = known;
  let last = known === null ? null : (snapshots.get(known.lastSnapshotId) ?? null);
  let waiting: Waiting[] = [];
  const judged = async (drift: DriftPart): Promise<DriftPart> => {
    if (waiting.length === 0) return drift;
    const { state, quiet, happenings } = await judge.drift({
      state: drift.state,
      steps: await stepsOf(w, part, waiting),
    });
    waiting = [];
    await storeHappenings(w, key, part, happenings);
    return { ...drift, state: Buffer.from(state.buffer, state.byteOffset, state.byteLength), quiet };
  };
  for (const { buildId, snapshot, restart: ofBlock } of items) {
    if (entriesInPart(snapshot, part) === 0) continue;
    const restart = withinPart(ofBlock, part);
    const same = last !== null && samePart(last, snapshot, part);
    last = snapshot;
    const unwritten = waiting.length === 0;
    if (now === null || (unwritten && now.state === null && restart === "all")) {
      now = { lastSnapshotId: snapshot.id, repeats: 0, quiet: true, state: null };
    } else if (unwritten && same && now.quiet && restart === null) {
      now = { ...now, lastSnapshotId: snapshot.id, repeats: now.repeats + 1 };
    } else {
      if (unwritten) waiting.push(...caughtUp(now, buildId, snapshots));
      waiting.push({ buildId, snapshot: same ? null : snapshot, times: 1, restart });
      now = { ...now, lastSnapshotId: snapshot.id, repeats: 0 };
      if (isFull(waiting, part)) now = await judged(now);
    }
  }
  if (now !== null) await storeDriftPart(w, key, part, await judged(now));
}

/** The builds that were only counted so far. */
function caughtUp(now: DriftPart, buildId: number, snapshots: ReadonlyMap<number, SnapshotPlanes>): Waiting[] {
  const snapshot = snapshots.get(now.lastSnapshotId) ?? null;
  if (now.state === null) return [{ buildId, snapshot, times: now.repeats + 1, restart: null }];
  return now.repeats === 0 ? [] : [{ buildId, snapshot: null, times: now.repeats, restart: null }];
}

function isFull(waiting: readonly Waiting[], part: number): boolean {
  const entries = waiting.reduce((sum, { snapshot }) => sum + (snapshot ? entriesInPart(snapshot, part) : 0), 0);
  return waiting.length >= MOST_STEPS || entries >= MOST_ENTRIES;
}

function withinPart(restart: ChainItem["restart"], part: number): ChainItem["restart"] {
  if (restart === null || restart === "all") return restart;
  const first = part * PART_ENTRIES;
  const within = restart.filter((entry) => entry >= first && entry < first + PART_ENTRIES);
  return within.length === 0 ? null : within.map((entry) => entry - first);
}

async function stepsOf(w: Writer, part: number, waiting: readonly Waiting[]): Promise<DriftStep[]> {
  const tiles = await loadTiles(
    w,
    waiting.flatMap(({ snapshot }) => (snapshot ? allPartTiles(snapshot, part) : [])),
  );
  return waiting.map(({ snapshot, ...step }) => ({ ...step, tiles: snapshot && driftTiles(snapshot, part, tiles) }));
}
