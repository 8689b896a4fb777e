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

export interface BlockCoverage {
  readonly counts: CoverageCounts;
  /** The verdict and age planes as indices into the tiles. */
  readonly planes: readonly PlaneTiles<number>[];
}

export interface JudgedCoverages {
  /** In the order of the tasks; null where the block's own numbers say it all. */
  readonly coverages: readonly (BlockCoverage | null)[];
  readonly tiles: PackedTiles;
}

/** What a build says of some blocks once earlier checks are heard, from stored tiles to stored tiles. Pure; in a worker. */
export function judgeCoverages(tasks: readonly CoverageTask[]): JudgedCoverages {
  const tiles = new TileSet();
  const coverages = tasks.map((task) => judgeCoverage(task, tiles));
  return { coverages, tiles: tiles.pack() };
}

function judgeCoverage(task: CoverageTask, tiles: TileSet): BlockCoverage | null {
  const { entries, limit } = task;
  const bytes = (name: PlaneName, stored: readonly StoredTile[]) => new Uint8Array(assemble(name, stored, entries));
  const before = task.before && {
    verdict: bytes("verdict", task.before.verdict),
    age: task.before.age && bytes("age", task.before.age),
  };
  const motion = task.motion && bytes("motion", task.motion);
  const carried = carryVerdicts(bytes("verdict", task.verdict), motion, before, limit);
  if (carried.carried === 0) return null;
  const planes = [tiles.addPlane("verdict", carried.verdict), tiles.addPlane("age", carried.age)];
  return { counts: { ...carried.counts, carried: carried.carried, oldest: carried.oldest }, planes };
}
