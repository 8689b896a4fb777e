/** Unit roundoff of binary64, 2^-53 (IEEE Std 754-2019, table 3.5: p = 53). */
export const UNIT_ROUNDOFF = 2 ** -53;
/** Relative precision eta of a function's own values when none was posted. */
export const DEFAULT_PRECISION = 2 * UNIT_ROUNDOFF;
