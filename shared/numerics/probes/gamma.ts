/**
 * Growth of the relative rounding error of n operations.
 *
 * Formula: gamma_n = n u / (1 - n u).
 * Units: dimensionless. Domain: n >= 0, unit roundoff u >= 0. Throws: never.
 * Returns +Infinity where n u >= 1: nothing is known of the result then.
 * Source: N. J. Higham, Accuracy and Stability of Numerical Algorithms, 2nd ed., SIAM 2002, lemma 3.1 (a computed dot
 * product of n terms is off by at most gamma_n |x|.|y|, section 3.1).
 */
export function gamma(n: number, unitRoundoff: number): number {
  const grown = n * unitRoundoff;
  return grown < 1 ? grown / (1 - grown) : Infinity;
}
