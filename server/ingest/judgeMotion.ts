import { blockMotion } from "../../shared/numerics/motion/blockMotion.ts";
import { leftBehind } from "../../shared/numerics/signatures/leftBehind.ts";
import type { BlockNames, NamedSignature } from "../../shared/numerics/signatures/types.ts";
import type { MotionCounts, MotionSide } from "../../shared/numerics/types.ts";
import { assemble } from "./assemble.ts";
import type { StoredTile } from "./assemble.ts";
import { TileSet } from "./tileSet.ts";
import type { PackedTiles } from "./tileSet.ts";

export interface StoredSide {
  readonly floor: number;
  readonly derivative: readonly StoredTile[];
  readonly reference: readonly StoredTile[];
  readonly resolution: readonly StoredTile[];
  /** Null where none were posted. */
  readonly outputValues: readonly StoredTile[] | null;
}

export interface MotionTask {
  readonly rows: number;
  readonly columns: number;
  readonly now: StoredSide & { readonly verdict: readonly StoredTile[] };
  readonly before: StoredSide;
  readonly rtol: number;
  readonly names: BlockNames;
}

export interface JudgedMotion {
  readonly counts: MotionCounts;
  readonly tiles: PackedTiles;
  /** Told where disagreeing entries are what the reference was before. */
  readonly leftBehind: NamedSignature | null;
  /** The motion plane as indices into the tiles. */
  readonly plane: readonly number[];
}

/** Motion of every entry of a block between two builds, from stored tiles to stored tiles. Pure; runs in a worker. */
export function judgeMotion(task: MotionTask): JudgedMotion {
  const { rows, columns } = task;
  const verdict = assemble("verdict", task.now.verdict, rows * columns);
  const now = { ...side(task.now, rows, columns), verdict: new Uint8Array(verdict) };
  const before = side(task.before, rows, columns);
  const { motion, counts } = blockMotion(now, before, rows, columns);
  const tiles = new TileSet();
  const plane = tiles.addPlane("motion", motion).tiles;
  const behind = leftBehind(now, before, task.rtol, rows, columns, task.names);
  return { counts, plane, leftBehind: behind, tiles: tiles.pack() };
}

function side(stored: StoredSide, rows: number, columns: number): MotionSide {
  const entries = rows * columns;
  return {
    floor: stored.floor,
    derivative: new Float64Array(assemble("derivative", stored.derivative, entries)),
    reference: new Float64Array(assemble("reference", stored.reference, entries)),
    resolution: new Float32Array(assemble("resolution", stored.resolution, entries)),
    outputValues: stored.outputValues && new Float64Array(assemble("outputValues", stored.outputValues, rows)),
  };
}
