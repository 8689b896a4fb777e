import { MOTIONS } from "../../shared/domain/vocabulary.ts";
import type { Motion } from "../../shared/domain/vocabulary.ts";
import { relativeError } from "../../shared/numerics/verdict/relativeError.ts";
import type { Reader } from "../db/reader.ts";
import type { BlockDetails } from "../ingest/blockDetails.ts";
import { unpackPlanes } from "../ingest/planes.ts";
import { ENTRY_PLANES, entryValuesAt, presentEntryValues } from "../record/entryValues.ts";
import {
  loadSnapshots,
  loadSparsePlanes,
  loadTiles,
  SparsePlane,
  tileIndicesOf,
  tilesOf,
} from "../record/readPlanes.ts";
import type { SnapshotPlanes } from "../record/readPlanes.ts";
import type { StoredBreakWorst } from "./storedTrace.ts";
import type { BreakPart } from "./traceLane.ts";

/** What the build at the onset says of a break's entries. */
export interface BreakDescription {
  readonly models: readonly string[];
  readonly sources: readonly string[];
  readonly worst: StoredBreakWorst;
  /** The motion that most of the entries made, or null where there was nothing to compare with. */
  readonly motion: Motion | null;
}

interface OnsetBlock {
  readonly blockId: number;
  readonly model: string;
  readonly snapshotId: number;
  readonly motionPlanes: Buffer | null;
  readonly details: string;
}

/** Reads the numbers of the entries in the build of the onset, only the tiles that hold them. */
export async function describeBreak(
  reader: Reader,
  onsetBuildId: number,
  parts: readonly BreakPart[],
): Promise<BreakDescription> {
  const blocks = await reader.select<OnsetBlock>(
    `SELECT bb.blockId, b.model, bb.snapshotId, m.planes AS motionPlanes, d.details
     FROM build_blocks bb JOIN blocks b ON b.id = bb.blockId JOIN block_details d ON d.id = bb.detailsId
     LEFT JOIN motions m ON m.id = bb.motionId
     WHERE bb.buildId = $1 AND bb.blockId IN (SELECT value FROM json_each($2))`,
    [onsetBuildId, JSON.stringify(parts.map((part) => part.blockId))],
  );
  const blockOf = new Map(blocks.map((block) => [block.blockId, block]));
  const snapshots = await loadSnapshots(
    reader,
    blocks.map((block) => block.snapshotId),
  );
  const worsts: StoredBreakWorst[] = [];
  const votes = new Uint32Array(MOTIONS.length);
  for (const part of parts) {
    const block = blockOf.get(part.blockId) as OnsetBlock;
    worsts.push(await worstOf(reader, part, snapshots.get(block.snapshotId) as SnapshotPlanes));
    await countMotions(reader, part, block.motionPlanes, votes);
  }
  return {
    models: [...new Set(blocks.map((block) => block.model))].sort(),
    sources: [...new Set(blocks.flatMap((block) => (JSON.parse(block.details) as BlockDetails).sources))].sort(),
    worst: worsts.reduce((a, b) => (magnitude(b) > magnitude(a) ? b : a)),
    motion: mostVoted(votes),
  };
}

/** An entry without a relative error is not finite: nothing is worse. */
function magnitude(worst: StoredBreakWorst): number {
  return worst.error === null ? Infinity : Number(worst.error);
}

async function worstOf(reader: Reader, part: BreakPart, snapshot: SnapshotPlanes): Promise<StoredBreakWorst> {
  const [planes] = await loadSparsePlanes(reader, [{ snapshot, entries: part.entries }], ENTRY_PLANES);
  let worst = part.entries[0];
  let largest = -1;
  for (const entry of part.entries) {
    const error = relativeError(planes.derivative.at(entry), planes.reference.at(entry), snapshot.floor);
    const size = Number.isNaN(error) ? Infinity : error;
    if (size > largest) {
      largest = size;
      worst = entry;
    }
  }
  return {
    blockId: part.blockId,
    row: Math.floor(worst / part.columns),
    column: worst % part.columns,
    ...presentEntryValues(entryValuesAt(planes, worst, snapshot.floor)),
  };
}

/** Adds one vote for each entry's motion; `votes` is by the motion's code. */
async function countMotions(reader: Reader, part: BreakPart, packed: Buffer | null, votes: Uint32Array): Promise<void> {
  if (packed === null) return;
  const ids = tilesOf(unpackPlanes(packed), "motion");
  const tiles = await loadTiles(
    reader,
    [...tileIndicesOf(part.entries)].map((index) => ids[index]),
  );
  const plane = new SparsePlane("motion", ids, tiles);
  for (const entry of part.entries) votes[plane.at(entry)] += 1;
}

function mostVoted(votes: Uint32Array): Motion | null {
  const most = votes.reduce((a, b) => Math.max(a, b), 0);
  return most === 0 ? null : MOTIONS[votes.indexOf(most)];
}
