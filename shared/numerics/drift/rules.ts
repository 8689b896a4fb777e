/** Steps of g in a decade. */
export const STEPS_PER_DECADE = 1024;
/** Builds that make a whole baseline, and those that are enough to begin. */
export const BASELINE_BUILDS = 20;
export const YOUNG_BUILDS = 5;
/** Least spread, in decades: a calmer entry is not watched more closely than this. */
export const LEAST_SPREAD = 0.15;
/** Spread that is assumed before there are YOUNG_BUILDS, in decades. */
export const ASSUMED_SPREAD = 0.3;
/** CUSUM: z within +-WINSOR, allowance k, decision interval h. */
export const WINSOR = 3;
export const ALLOWANCE = 0.5;
export const DECISION_INTERVAL = 8;
/** S goes no higher: an entry that has long been a little higher is soon forgiven, and repeats come to rest. */
export const CUSUM_CAP = 16;
/** From here on an entry is suspected: its baseline does not learn the build, and a jump is no news. */
export const SUSPICION = 3;
/** A drift worth telling: so many decades, and so many spreads. */
export const LEAST_DECADES = 1;
export const LEAST_SPREADS = 4;
/** One build counts for so many limits at most when two are averaged. */
const CLIPPED_LIMITS = 1.5;
/** The rise of a jump is the difference of two builds, and so is its deviation: sqrt 2 of that of one. */
const JUMP_SPREADS = LEAST_SPREADS * Math.SQRT2;
/** A climb ends after CALM_BUILDS in a row under CALM_SPREADS spreads. */
export const CALM_SPREADS = 3;
export const CALM_BUILDS = 3;
/** 1 / Phi^-1(3/4): MAD to standard deviation of normal values. */
export const MAD_TO_SIGMA = 1.4826;

/** sqrt(1 + pi / (2n)), by n. */
const ESTIMATED_CENTRE = Float64Array.from({ length: BASELINE_BUILDS + 1 }, (_, n) => Math.sqrt(1 + Math.PI / (2 * n)));

/**
 * Spread of a baseline of n builds, in decades: max(0.15, 1.4826 MAD), or 0.3 for fewer than five builds, times
 * sqrt(1 + pi / (2n)): a new g differs from the estimated centre by its own deviation and by that of the median, whose
 * variance is pi / (2n) times that of g (large n, normal values).
 */
export function spreadOf(n: number, mad: number): number {
  const own = n < YOUNG_BUILDS ? ASSUMED_SPREAD : Math.max(LEAST_SPREAD, MAD_TO_SIGMA * mad);
  return own * ESTIMATED_CENTRE[n];
}

/**
 * S after one more build: max(0, S + z - 0.5), at most 16, with z = drift / spread within [-3, 3], and not above 0 where
 * the reference does not see an error. Not yet rounded to binary32.
 */
export function nextCusum(cusum: number, z: number, seen: boolean): number {
  const bounded = Math.max(-WINSOR, Math.min(seen ? WINSOR : 0, z));
  return Math.max(0, Math.min(CUSUM_CAP, cusum + bounded - ALLOWANCE));
}

/** Drift from which on an entry is worth telling, in decades. */
export function driftLimit(spread: number): number {
  return Math.max(LEAST_DECADES, LEAST_SPREADS * spread);
}

/**
 * Rise from one build to the next from which on it is a jump, in decades; a young baseline of n builds is taken for no
 * calmer than is assumed of an unknown one.
 */
export function jumpLimit(n: number, spread: number): number {
  const known = n < BASELINE_BUILDS ? Math.max(ASSUMED_SPREAD, spread) : spread;
  return Math.max(LEAST_DECADES, JUMP_SPREADS * known);
}

/**
 * Whether drift has been large enough for a climb: the mean of this build's and the one before's reaches the limit,
 * neither taken for more than 1.5 limits. One lucky build in thousands of entries is certain, and does not make a climb.
 */
export function isHigh(drift: number, before: number, limit: number): boolean {
  const most = CLIPPED_LIMITS * limit;
  return (Math.min(drift, most) + Math.min(before, most)) / 2 >= limit;
}
