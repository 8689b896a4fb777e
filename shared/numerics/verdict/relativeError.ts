/**
 * Relative error of one entry.
 *
 * Formula: e = |a - r| / max(|r|, floor); 0 where a = r.
 * Units: derivative, reference and floor in the unit of the entry; the result is dimensionless.
 * Domain: floor >= 0. Throws: never.
 * NaN policy: NaN where derivative or reference is not finite. Finite input never gives NaN: with floor 0 and
 * reference 0 the error is 0 or +Infinity.
 * Accuracy: 1.5 units roundoff; |a - r| beyond the binary64 range is halved first and does not overflow.
 * Source: section 2 of the judging rules.
 */
export function relativeError(derivative: number, reference: number, floor: number): number {
  const distance = Math.abs(derivative - reference);
  if (distance === 0) return 0;
  const size = Math.max(Math.abs(reference), floor);
  if (distance < Infinity) return distance / size;
  if (!Number.isFinite(derivative) || !Number.isFinite(reference)) return NaN;
  return Math.abs(derivative / 2 - reference / 2) / (size / 2);
}
