/**
 * One judged build of a block, as it stands in the record: planes row-major and of one length.
 * resolution = U / max(|r|, floor); NaN = unreferenced, +Infinity = cannot tell.
 */
export interface DriftValues {
  readonly derivative: Float64Array;
  readonly reference: Float64Array;
  readonly resolution: Float32Array;
  /** Codes of VERDICTS. */
  readonly verdict: Uint8Array;
  readonly floor: number;
}

/** What one entry's numbers of one build tell about drift; its number is the byte in `DriftState.standing`. */
export const STANDING = {
  /** Nothing: unreferenced, invalid, cannot be told, or disagrees (that is a break). */
  silent: 0,
  /** d <= U: the reference does not see an error. */
  within: 1,
  /** d > U. */
  beyond: 2,
} as const;

/** Running drift of the entries of one block in one lane; every array has one element an entry. */
export interface DriftState {
  /** Builds the baseline has learned from, at most BASELINE_BUILDS. */
  readonly count: Uint8Array;
  /** STANDING of the newest build. */
  readonly standing: Uint8Array;
  /** g of the newest build that told something, in steps. */
  readonly last: Int16Array;
  /** Median of g over the baseline, in decades; 0 without one. */
  readonly centre: Float32Array;
  /** Spread of g about the centre, in decades; 0 without a baseline. */
  readonly spread: Float32Array;
  /** CUSUM S, 0 to CUSUM_CAP. */
  readonly cusum: Float32Array;
  /** Build id of the first build since S was last 0, of a climb under way that of its onset; 0 = none. */
  readonly onset: Int32Array;
  /** 1 while a climb is under way. */
  readonly climbing: Uint8Array;
  /** Builds in a row back under centre + 3 spread, of a climb under way. */
  readonly calm: Uint8Array;
  /** 0 where repeating the newest build's numbers would change nothing, 1 where it may. */
  readonly awake: Uint8Array;
  /**
   * g of the builds the baseline has learned from, in steps, ascending, BASELINE_BUILDS places an entry; null while
   * no entry's baseline is unfinished.
   */
  window: Int16Array | null;
}

/** Events of one kind in one build; the arrays run along each other, entries ascending. */
export interface DriftEventList {
  readonly entries: Uint32Array;
  /** Build id of the onset. */
  readonly onsets: Int32Array;
  readonly decades: Float32Array;
}

export interface DriftEvents {
  /** decades: the drift g - centre. */
  readonly climbs: DriftEventList;
  /** onsets: the build itself; decades: the rise since the build before. */
  readonly jumps: DriftEventList;
  /** onsets: those of the climbs that ended; decades: the drift that is left. */
  readonly ends: DriftEventList;
}

export type DriftEventKind = "climb" | "jump" | "end";

/** One entry in one build. */
export interface DriftItem {
  readonly derivative: number;
  readonly reference: number;
  readonly resolution: number;
  readonly verdict: number;
  readonly floor: number;
}

/** What one build told about the drift of one entry. */
export interface DriftPoint {
  /** g - centre; null while the baseline is too young. */
  readonly decades: number | null;
  readonly cusum: number;
  /** Centre and spread that the build was measured with, in decades; null while the baseline is too young. */
  readonly centre: number | null;
  readonly spread: number | null;
  readonly event: DriftEventKind | null;
}
