import { VERDICT_CODE } from "../../../shared/domain/vocabulary.ts";
import { advanceDrift } from "../../../shared/numerics/drift/advanceDrift.ts";
import { newDriftState } from "../../../shared/numerics/drift/newDriftState.ts";
import type { DriftItem, DriftValues } from "../../../shared/numerics/drift/types.ts";
import { normals } from "./normals.ts";

const RESOLUTION = Math.fround(1e-14);

/** An entry whose relative error is 10^g, seen by a reference that knows much better. */
export function itemOf(g: number, change: Partial<DriftItem> = {}): DriftItem {
  const error = 10 ** g;
  return { derivative: error, reference: 0, resolution: RESOLUTION, verdict: VERDICT_CODE.agrees, floor: 1, ...change };
}

/** A build of a block from its entries; they share the floor of the first. */
export function valuesOf(items: readonly DriftItem[]): DriftValues {
  return {
    derivative: Float64Array.from(items, ({ derivative }) => derivative),
    reference: Float64Array.from(items, ({ reference }) => reference),
    resolution: Float32Array.from(items, ({ resolution }) => resolution),
    verdict: Uint8Array.from(items, ({ verdict }) => verdict),
    floor: items[0]?.floor ?? 0,
  };
}

/** Lanes of one length: g = -9 with normal noise, climbing by `slope` a build after `start` builds. */
export interface DriftTrial {
  readonly entries: number;
  readonly builds: number;
  /** Standard deviation of the noise, and rise from build to build, in decades. */
  readonly noise: number;
  readonly slope: number;
  readonly start: number;
  readonly seed: number;
}

/** g of every entry, build after build. */
export function lanesOf({ entries, builds, noise, slope, start, seed }: DriftTrial): Float64Array[] {
  const normal = normals(seed);
  return Array.from({ length: builds }, (_, b) => {
    const level = -9 + slope * Math.max(0, b + 1 - start);
    return Float64Array.from({ length: entries }, () => level + noise * normal());
  });
}

export interface DriftTally {
  /** Builds from the start of the climb to its first telling, per entry; Infinity where it was not told. */
  readonly delays: number[];
  /** Climbs and jumps told, all of them. */
  readonly climbs: number;
  readonly jumps: number;
}

/** Follows the lanes as the record does. */
export function followDrift(lanes: readonly Float64Array[], start: number): DriftTally {
  const entries = lanes[0]?.length ?? 0;
  const state = newDriftState(entries);
  const delays = Array<number>(entries).fill(Infinity);
  let climbs = 0;
  let jumps = 0;
  lanes.forEach((g, b) => {
    const events = advanceDrift(state, b + 1, valuesOf(Array.from(g, (value) => itemOf(value))));
    climbs += events.climbs.entries.length;
    jumps += events.jumps.entries.length;
    for (const k of events.climbs.entries) {
      if (b + 1 > start) delays[k] = Math.min(delays[k] ?? Infinity, b + 1 - start);
    }
  });
  return { delays, climbs, jumps };
}
