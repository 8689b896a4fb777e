import type { Writer } from "../db/write.ts";
import type { DriftHappening, DriftStep, DriftTask } from "../ingest/judgeDrift.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import { loadTiles } from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import { BATCH_ENTRIES, batches } from "./batches.ts";
import { goOn, isDone } from "./driftWalk.ts";
import type { DriftWalk, Waiting } from "./driftWalk.ts";
import {
  allPartTiles,
  driftTiles,
  entriesInPart,
  loadDriftStates,
  partKey,
  storeDriftParts,
  storeHappenings,
} from "./driftParts.ts";
import type { PlacedPart } from "./driftParts.ts";

/**
 * Follows parts of blocks of one lane through the builds of their walks. Parts are gone through in batches, so that
 * many small blocks cost one task and a few statements, and a large one is held piece by piece.
 */
export async function followWalks(
  w: Writer,
  judge: JudgePool,
  walks: readonly DriftWalk[],
  snapshots: ReadonlyMap<number, SnapshotPlanes>,
): Promise<void> {
  for (const batch of batches(walks, sizeOf, BATCH_ENTRIES)) {
    const happenings: { place: PlacedPart; happening: DriftHappening }[] = [];
    for (const walk of batch) goOn(walk, snapshots);
    for (let busy = waitingOf(batch); busy.length > 0; busy = waitingOf(batch)) {
      const judged = await judge.drifts(await tasksOf(w, busy));
      busy.forEach((walk, at) => {
        const { state, quiet, happenings: told } = judged[at];
        happenings.push(...told.map((happening) => ({ place: walk.place, happening })));
        walk.waiting = [];
        if (walk.now !== null) walk.now = { ...walk.now, state, quiet };
        goOn(walk, snapshots);
      });
    }
    await storeHappenings(w, happenings);
    await storeDriftParts(
      w,
      batch.flatMap(({ place, now }) => (now === null ? [] : [{ place, drift: now }])),
    );
  }
}

function sizeOf({ place, items }: DriftWalk): number {
  return items.reduce((most, { snapshot }) => Math.max(most, entriesInPart(snapshot, place.part)), 0);
}

function waitingOf(walks: readonly DriftWalk[]): DriftWalk[] {
  return walks.filter((walk) => !isDone(walk));
}

async function tasksOf(w: Writer, walks: readonly DriftWalk[]): Promise<DriftTask[]> {
  const states = await loadDriftStates(
    w,
    walks.filter(({ now }) => now?.state === "in the record").map(({ place }) => place),
  );
  const tiles = await loadTiles(
    w,
    walks.flatMap(({ waiting, place }) =>
      waiting.flatMap(({ snapshot }) => (snapshot ? allPartTiles(snapshot, place.part) : [])),
    ),
  );
  const stepOf = ({ snapshot, ...step }: Waiting, part: number): DriftStep => ({
    ...step,
    tiles: snapshot && driftTiles(snapshot, part, tiles),
  });
  return walks.map(({ place, now, waiting }) => ({
    state: now?.state instanceof Uint8Array ? now.state : (states.get(partKey(place)) ?? null),
    steps: waiting.map((step) => stepOf(step, place.part)),
  }));
}
