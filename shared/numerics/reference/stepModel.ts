import { DEFAULT_PRECISION, UNIT_ROUNDOFF } from "../roundoff.ts";
import type { Scheme } from "./scheme.ts";

/*
 * Modelled uncertainty of a single step h at an entry r of a row of size P:
 *
 *   U = S truncation + P noise + |r| rounding
 *
 * one-sided (10 h/2L, 3 * 2 eta/h, 3 (u|x|/h + 4u)); central (10 h^2/6L^2, 3 eta/h, 3 (u|x|/h + 4u));
 * complex step (8 max(eta, 2u) + 2 h^2/6L^2, 0, 0): nothing is subtracted, but a solver that stops early stops early in the
 * imaginary part, too. S stands for the second derivative times L, or the third times L^2.
 * The row's size P = max(|F|, sum over columns of |r| L) bounds the terms that F is made of to first order: where
 * they cancel, |F| alone says nothing of the rounding in them.
 *
 * Sources: P. E. Gill, W. Murray, M. A. Saunders, M. H. Wright, Computing forward-difference intervals for numerical
 * optimization, SIAM J. Sci. Stat. Comput. 4(2):310-321, 1983, doi:10.1137/0904025 (truncation and noise);
 * W. Squire, G. Trapp, SIAM Review 40(1):110-112, 1998, doi:10.1137/S003614459631241X (complex step);
 * the safety factors were set on the problems of More, Garbow & Hillstrom (tests/numerics/published.test.ts).
 */
export const TRUNCATION_SAFETY = 10;
export const NOISE_SAFETY = 3;
export const COMPLEX_PRECISIONS = 8;
export const COMPLEX_SAFETY = 2;
/** An entry this small beside its row tells nothing of its own curvature. */
const NEGLIGIBLE = 1e-3;

/** What the truncation is of S: h/2L or h^2/6L^2; h and L in the unit of the input, both > 0. */
export function truncationShare(scheme: Scheme, h: number, length: number): number {
  const ratio = h / length;
  return scheme.order === 1 ? ratio / 2 : (ratio * ratio) / 6;
}

/** Dimensionless; h and L in the unit of the input, both > 0. */
export function truncationFactor(scheme: Scheme, h: number, precision: number, length: number): number {
  const share = truncationShare(scheme, h, length);
  if (scheme.noisyValues === 0)
    return finite(COMPLEX_PRECISIONS * Math.max(precision, DEFAULT_PRECISION) + COMPLEX_SAFETY * share);
  return finite(TRUNCATION_SAFETY * share);
}

/** One over the unit of the input. */
export function noiseFactor(scheme: Scheme, h: number, precision: number): number {
  return finite((NOISE_SAFETY * scheme.noisyValues * precision) / h);
}

/** Dimensionless; x is |x|. */
export function roundingFactor(scheme: Scheme, h: number, x: number): number {
  return scheme.noisyValues === 0 ? 0 : finite(NOISE_SAFETY * UNIT_ROUNDOFF * (x / h + 4));
}

const CHOICES = new Float64Array(4);

/**
 * S of an entry of magnitude m, in the unit of the entry: max(|F|/L, m), or P/L where m is negligible beside it (an
 * entry at a stationary point is small, the curvature there is not). NaN where m is NaN.
 */
export function entrySize(m: number, ofValue: number, ofRow: number): number {
  // A table and no condition: which of the three it is changes from entry to entry, and a branch that is taken
  // every other time costs more than all the rest.
  CHOICES[0] = m;
  CHOICES[1] = ofValue;
  CHOICES[2] = ofRow;
  CHOICES[3] = ofRow;
  return CHOICES[Number(m < ofValue) + 2 * Number(m < NEGLIGIBLE * ofRow)];
}

/** Keeps a factor within the binary64 range, so that 0 times it stays 0. */
function finite(factor: number): number {
  return Math.min(factor, Number.MAX_VALUE);
}
