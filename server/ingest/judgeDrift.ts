import { VERDICT_CODE } from "../../shared/domain/vocabulary.ts";
import { advanceDrift } from "../../shared/numerics/drift/advanceDrift.ts";
import { isQuiet } from "../../shared/numerics/drift/isQuiet.ts";
import { newDriftState } from "../../shared/numerics/drift/newDriftState.ts";
import { packDrift } from "../../shared/numerics/drift/packDrift.ts";
import { resizeDrift } from "../../shared/numerics/drift/resizeDrift.ts";
import { restartDrift } from "../../shared/numerics/drift/restartDrift.ts";
import type { DriftEventKind, DriftEventList, DriftEvents, DriftState } from "../../shared/numerics/drift/types.ts";
import type { DriftValues } from "../../shared/numerics/drift/types.ts";
import { unpackDrift } from "../../shared/numerics/drift/unpackDrift.ts";
import { assemble } from "./assemble.ts";
import type { StoredTile } from "./assemble.ts";

/** The planes that drift is told from, of one part of a block. */
export const DRIFT_PLANES = ["derivative", "reference", "resolution", "verdict"] as const;

export interface DriftTiles extends Record<(typeof DRIFT_PLANES)[number], readonly StoredTile[]> {
  readonly entries: number;
  readonly floor: number;
}

/** One build of a part of a block, or several in a row that say the same. */
export interface DriftStep {
  readonly buildId: number;
  /** Null: the same numbers as in the step before. */
  readonly tiles: DriftTiles | null;
  readonly times: number;
  /** Entries whose baseline begins with this build; null for none. */
  readonly restart: Uint32Array | "all" | null;
}

export interface DriftTask {
  /** As packed before; null where nothing is known of the part. */
  readonly state: Uint8Array | null;
  readonly steps: readonly DriftStep[];
}

/** Entries to which the same happened in one build. */
export interface DriftHappening {
  readonly buildId: number;
  readonly kind: DriftEventKind;
  readonly onsetBuildId: number;
  /** Flat indices within the part, ascending. */
  readonly entries: Uint32Array;
  /** Of the entry with the largest. */
  readonly decades: number;
  readonly worstEntry: number;
}

export interface JudgedDrift {
  readonly state: Uint8Array;
  readonly quiet: boolean;
  readonly happenings: readonly DriftHappening[];
}

/** Follows the drift of a part of a block through builds in a row. Pure; runs in a worker. */
export function judgeDrift(task: DriftTask): JudgedDrift {
  let state = task.state === null ? newDriftState(0) : unpackDrift(task.state);
  const happenings: DriftHappening[] = [];
  for (const step of task.steps) {
    if (step.tiles !== null && step.tiles.entries > state.count.length) state = resizeDrift(state, step.tiles.entries);
    if (step.restart !== null) happenings.push(...restarted(state, step.buildId, step.restart));
    const values = step.tiles && valuesOf(step.tiles, state.count.length);
    happenings.push(...happeningsOf(advanceDrift(state, step.buildId, values), step.buildId));
    happenings.push(...repeated(state, step));
  }
  return { state: packDrift(state), quiet: isQuiet(state), happenings };
}

/** What follows when a build is repeated: nothing any more as soon as the state is quiet. */
function repeated(state: DriftState, { buildId, times }: DriftStep): DriftHappening[] {
  const happenings: DriftHappening[] = [];
  for (let left = times - 1; left > 0; left -= 1) {
    if (isQuiet(state)) {
      advanceDrift(state, buildId, null, left);
      break;
    }
    happenings.push(...happeningsOf(advanceDrift(state, buildId, null), buildId));
  }
  return happenings;
}

function restarted(state: DriftState, buildId: number, restart: Uint32Array | "all"): DriftHappening[] {
  const onsets = state.onset.slice();
  const within = restart === "all" ? null : restart.filter((entry) => entry < state.count.length);
  const entries = restartDrift(state, within);
  const ends = {
    entries,
    onsets: Int32Array.from(entries, (k) => onsets[k]),
    decades: new Float32Array(entries.length),
  };
  return byOnset("end", buildId, ends);
}

function happeningsOf({ climbs, jumps, ends }: DriftEvents, buildId: number): DriftHappening[] {
  return [...byOnset("climb", buildId, climbs), ...byOnset("jump", buildId, jumps), ...byOnset("end", buildId, ends)];
}

function byOnset(kind: DriftEventKind, buildId: number, list: DriftEventList): DriftHappening[] {
  return [...new Set(list.onsets)].map((onset) => {
    const places = [...list.entries.keys()].filter((at) => list.onsets[at] === onset);
    const worst = places.reduce((a, b) => (list.decades[b] > list.decades[a] ? b : a));
    return {
      buildId,
      kind,
      onsetBuildId: onset,
      entries: Uint32Array.from(places, (at) => list.entries[at]),
      decades: list.decades[worst],
      worstEntry: list.entries[worst],
    };
  });
}

/** The planes of a part, filled up with entries that say nothing where the block has fewer rows than before. */
function valuesOf(tiles: DriftTiles, length: number): DriftValues {
  const { entries, floor } = tiles;
  const plane = (name: (typeof DRIFT_PLANES)[number]) => assemble(name, tiles[name], entries);
  const filled = <T extends { readonly length: number; set(from: T): void }>(own: T, whole: (n: number) => T): T => {
    if (own.length === length) return own;
    const to = whole(length);
    to.set(own);
    return to;
  };
  return {
    derivative: filled(new Float64Array(plane("derivative")), (n) => new Float64Array(n)),
    reference: filled(new Float64Array(plane("reference")), (n) => new Float64Array(n)),
    resolution: filled(new Float32Array(plane("resolution")), (n) => new Float32Array(n)),
    verdict: filled(new Uint8Array(plane("verdict")), (n) => new Uint8Array(n).fill(VERDICT_CODE.unreferenced)),
    floor,
  };
}
