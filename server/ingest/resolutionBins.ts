/** Entries by the power of two just above their resolution: `[exponent, entries]`, ascending. */
export type ResolutionBins = readonly (readonly [number, number])[];

/**
 * Counts resolutions (binary32, from a judged block) by octave, reading the exponent from the bits: an entry in bin e
 * has a resolution below 2^e and at least half of that, so that it would be resolved at a tolerance of 2^e. Entries
 * without a reference (NaN) and those that cannot be told at all (infinity) are in no bin; a resolution of 0 counts
 * with the smallest.
 */
export function resolutionBins(resolution: Float32Array): ResolutionBins {
  const bits = new Uint32Array(resolution.buffer, resolution.byteOffset, resolution.length);
  const byExponent = new Uint32Array(256);
  for (let at = 0; at < bits.length; at++) byExponent[(bits[at] >>> 23) & 255] += 1;
  const bins: [number, number][] = [];
  // 255 is infinity and NaN; 0 is zero and the subnormal numbers.
  for (let exponent = 0; exponent < 255; exponent++) {
    if (byExponent[exponent] > 0) bins.push([exponent - 126, byExponent[exponent]]);
  }
  return bins;
}

/** Adds up the bins of several blocks into the resolution curve: share of `entries` resolved at each tolerance. */
export function resolutionCurve(parts: Iterable<ResolutionBins>, entries: number): { rtol: number; share: number }[] {
  const total = new Map<number, number>();
  for (const bins of parts) {
    for (const [exponent, count] of bins) {
      const clamped = Math.min(CURVE_LAST, Math.max(CURVE_FIRST, exponent));
      if (exponent <= CURVE_LAST) total.set(clamped, (total.get(clamped) ?? 0) + count);
    }
  }
  if (entries === 0) return [];
  let resolved = 0;
  return Array.from({ length: CURVE_LAST - CURVE_FIRST + 1 }, (_, at) => {
    resolved += total.get(CURVE_FIRST + at) ?? 0;
    return { rtol: 2 ** (CURVE_FIRST + at), share: resolved / entries };
  });
}

/** From unit roundoff to one. */
const CURVE_FIRST = -53;
const CURVE_LAST = 0;
