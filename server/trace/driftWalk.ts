import type { DriftStep } from "../ingest/judgeDrift.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import { entriesInPart, PART_ENTRIES, samePart } from "./driftParts.ts";
import type { DriftPart, PlacedPart } from "./driftParts.ts";

/** One build of a block on the chain. */
export interface ChainItem {
  readonly buildId: number;
  readonly snapshot: SnapshotPlanes;
  /** Flat indices of the entries whose baseline begins here; null for none. */
  readonly restart: Uint32Array | "all" | null;
}

/** What waits to be gone through by the judge; `snapshot` null: the numbers of the step before. */
export interface Waiting extends Omit<DriftStep, "tiles"> {
  readonly snapshot: SnapshotPlanes | null;
}

/** One part of a block on its way through builds. */
export interface DriftWalk {
  readonly place: PlacedPart;
  readonly items: readonly ChainItem[];
  /** The first item that was not looked at. */
  next: number;
  now: DriftPart | null;
  /** What the newest build said; null where nothing is known. */
  last: SnapshotPlanes | null;
  waiting: Waiting[];
}

/** Numbers that one task may hold, and steps. */
const MOST_ENTRIES = 4 * PART_ENTRIES;
const MOST_STEPS = 64;

export function newWalk(
  place: PlacedPart,
  known: DriftPart | null,
  items: readonly ChainItem[],
  snapshots: ReadonlyMap<number, SnapshotPlanes>,
): DriftWalk {
  const last = known === null ? null : (snapshots.get(known.lastSnapshotId) ?? null);
  return { place, items, next: 0, now: known, last, waiting: [] };
}

/** True where nothing waits for the judge. */
export function isDone({ waiting }: DriftWalk): boolean {
  return waiting.length === 0;
}

/**
 * Goes on with the builds of a walk until as much waits as one task may hold, or none is left. Builds that repeat
 * numbers from which nothing can follow are only counted.
 */
export function goOn(walk: DriftWalk, snapshots: ReadonlyMap<number, SnapshotPlanes>): void {
  const { items, place } = walk;
  while (walk.next < items.length && !isFull(walk)) {
    const item = items[walk.next];
    walk.next += 1;
    if (entriesInPart(item.snapshot, place.part) > 0) take(walk, item, snapshots);
  }
}

function take(walk: DriftWalk, item: ChainItem, snapshots: ReadonlyMap<number, SnapshotPlanes>): void {
  const { buildId, snapshot } = item;
  const { part } = walk.place;
  const { now, last, waiting } = walk;
  const restart = withinPart(item.restart, part);
  const same = last !== null && samePart(last, snapshot, part);
  const written = waiting.length > 0;
  walk.last = snapshot;
  if (now === null || (!written && now.state === "none" && restart === "all")) {
    walk.now = { lastSnapshotId: snapshot.id, repeats: 0, quiet: true, state: "none" };
  } else if (!written && same && now.quiet && restart === null) {
    walk.now = { ...now, lastSnapshotId: snapshot.id, repeats: now.repeats + 1 };
  } else {
    if (!written) waiting.push(...caughtUp(now, buildId, snapshots));
    waiting.push({ buildId, snapshot: same ? null : snapshot, times: 1, restart });
    walk.now = { ...now, lastSnapshotId: snapshot.id, repeats: 0 };
  }
}

/** The builds that were only counted so far. */
function caughtUp(now: DriftPart, buildId: number, snapshots: ReadonlyMap<number, SnapshotPlanes>): Waiting[] {
  const snapshot = snapshots.get(now.lastSnapshotId) ?? null;
  if (now.state === "none") return [{ buildId, snapshot, times: now.repeats + 1, restart: null }];
  return now.repeats === 0 ? [] : [{ buildId, snapshot: null, times: now.repeats, restart: null }];
}

function isFull({ waiting, place }: DriftWalk): boolean {
  const entries = waiting.reduce((sum, { snapshot }) => sum + (snapshot ? entriesInPart(snapshot, place.part) : 0), 0);
  return waiting.length >= MOST_STEPS || entries >= MOST_ENTRIES;
}

function withinPart(restart: ChainItem["restart"], part: number): ChainItem["restart"] {
  if (restart === null || restart === "all") return restart;
  const first = part * PART_ENTRIES;
  const within = restart.filter((entry) => entry >= first && entry < first + PART_ENTRIES);
  return within.length === 0 ? null : within.map((entry) => entry - first);
}
