/** Beyond this the upper tail is less than half a unit roundoff. */
const FAR = 8.3;

/**
 * Probability that a standard normal variable is at most x.
 *
 * Formula: 1/2 + phi(x) (x + x^3/3 + x^5/(3 5) + ...); 0 or 1 beyond 8.3. Throws: never. NaN policy: NaN in, NaN out.
 * Accuracy: 1e-15 absolute; small probabilities have no relative accuracy. Cost: up to about 110 terms.
 * Source: G. Marsaglia, Evaluating the Normal Distribution, J. Stat. Softw. 11(4):1-11, 2004.
 */
export function normalProbability(x: number): number {
  if (Math.abs(x) > FAR) return x > 0 ? 1 : 0;
  let sum = x;
  let before = 0;
  let term = x;
  for (let k = 3; sum !== before; k += 2) {
    before = sum;
    term *= (x * x) / k;
    sum += term;
    if (Number.isNaN(sum)) return NaN;
  }
  return 0.5 + sum * Math.exp(-0.5 * x * x - 0.91893853320467274178);
}
