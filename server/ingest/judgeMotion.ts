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

/** One block in two builds. */
export interface MotionTask {
  readonly rows: number;
  readonly columns: number;
  readonly now: StoredSide & { readonly verdict: readonly StoredTile[] };
  readonly before: StoredSide;
  readonly rtol: number;
  readonly names: BlockNames;
}

export interface BlockMotion {
  readonly counts: MotionCounts;
  /** Told where disagreeing entries are what the reference was before. */
  readonly leftBehind: NamedSignature | null;
  /** The motion plane as indices into the tiles. */
  readonly plane: readonly number[];
}

export interface JudgedMotions {
  /** In the order of the tasks. */
  readonly motions: readonly BlockMotion[];
  readonly tiles: PackedTiles;
}

/** Motion of every entry of some blocks between two builds, from stored tiles to stored tiles. Pure; runs in a worker. */
export function judgeMotions(tasks: readonly MotionTask[]): JudgedMotions {
  const tiles = new TileSet();
  const motions = tasks.map((task) => judgeMotion(task, tiles));
  return { motions, tiles: tiles.pack() };
}

function judgeMotion(task: MotionTask, tiles: TileSet): BlockMotion {
  const { rows, columns } = task;
  const verdict = assemble("verdict", task.now.verdict, rows * columns);
  const now = { ...side(task.now, rows, columns), verdict: new Uint8Array(verdict) };
  const before = side(task.before, rows, columns);
  const { motion, counts } = blockMotion(now, before, rows, columns);
  const behind = leftBehind(now, before, task.rtol, rows, columns, task.names);
  return { counts, leftBehind: behind, plane: tiles.addPlane("motion", motion).tiles };
}

/** Nothing moved in a block of so many entries. */
export function allStill(entries: number): JudgedMotions {
  const tiles = new TileSet();
  const plane = tiles.addPlane("motion", new Uint8Array(entries)).tiles;
  const counts = { still: entries, together: 0, "derivative-only": 0, "model-only": 0, apart: 0 };
  return { motions: [{ counts, leftBehind: null, plane }], tiles: tiles.pack() };
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
