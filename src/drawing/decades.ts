/** The ruler: sixteen decades of relative error, 10^-16 at the foot (0) and 10^0 at the head (1). */
export const DECADES = 16;

/** u = 2^-53 of binary64 (IEEE 754) and the floors that follow from it. */
const UNIT_ROUNDOFF = 2 ** -53;
export const LANDMARKS = [
  { name: "roundoff", at: UNIT_ROUNDOFF },
  { name: "central difference", at: UNIT_ROUNDOFF ** (2 / 3) },
  { name: "forward difference", at: UNIT_ROUNDOFF ** (1 / 2) },
  { name: "binary32", at: 2 ** -24 },
] as const;

/** Place of a relative error on the ruler, 0 (foot) to 1 (head); beyond the ends it stands at the end. */
export function rulerPlace(error: number): number {
  if (Number.isNaN(error) || error === Infinity) return 1;
  if (error <= 0) return 0;
  return Math.min(1, Math.max(0, 1 + Math.log10(error) / DECADES));
}

/** The error that stands at a place: the inverse of `rulerPlace` inside the ruler. */
export function rulerError(place: number): number {
  return 10 ** ((place - 1) * DECADES);
}
