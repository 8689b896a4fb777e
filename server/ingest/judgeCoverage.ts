import { carryVerdicts } from "../../shared/numerics/coverage/carryVerdicts.ts";
import type { VerdictCounts } from "../../shared/numerics/types.ts";
import { assemble } from "./assemble.ts";
import type { StoredTile } from "./assemble.ts";
import type { PlaneName, PlaneTiles } from "./planes.ts";
import { TileSet } from "./tileSet.ts";
import type { PackedTiles } from "./tileSet.ts";

export interface CoverageTask {
  readonly entries: number;
  readonly verdict: readonly StoredTile[];
  /** Null where there was nothing to compare with. */
  readonly motion: readonly StoredTile[] | null;
  readonly before: { readonly verdict: readonly StoredTile[]; readonly age: readonly StoredTile[] | null } | null;
  /** Builds after which an entry that was not checked again counts as unreferenced. */
  readonly limit: number;
}

/** JSON of a coverage's counts in the record. */
export interface CoverageCounts extends VerdictCounts {
  readonly carried: number;
  readonly oldest: number;
}

export interface JudgedCoverage {
  readonly counts: CoverageCounts;
  readonly tiles: PackedTiles;
  /** The verdict and age planes as indices into the tiles. */
  readonly planes: readonly PlaneTiles<number>[];
}

/**
 * What a build says of a block once earlier checks are heard, from stored tiles to stored tiles; null where that is
 * what its own numbers say. Pure; runs in a worker.
 */
export function judgeCoverage(task: CoverageTask): JudgedCoverage | null {
  const { entries, limit } = task;
  const bytes = (name: PlaneName, tiles: readonly StoredTile[]) => new Uint8Array(assemble(name, tiles, entries));
  const before = task.before && {
    verdict: bytes("verdict", task.before.verdict),
    age: task.before.age && bytes("age", task.before.age),
  };
  const motion = task.motion && bytes("motion", task.motion);
  const carried = carryVerdicts(bytes("verdict", task.verdict), motion, before, limit);
  if (carried.carried === 0) return null;
  const tiles = new TileSet();
  const planes = [tiles.addPlane("verdict", carried.verdict), tiles.addPlane("age", carried.age)];
  const counts = { ...carried.counts, carried: carried.carried, oldest: carried.oldest };
  return { counts, planes, tiles: tiles.pack() };
}
