import type { Remainders } from "./surveyRemainders.ts";

/** |alpha|, the error of the directional derivative, and how far it may be off. */
export interface Extrapolated {
  readonly value: number;
  readonly uncertainty: number;
}

/** Guard on the last change: two steps tell little of how R/h goes on, three or more tell how it bends. */
const GUARD_OF_TWO = 10;
const GUARD = 3;

/**
 * R/h extrapolated to h = 0: the error of the directional derivative, as R(h) = |alpha h + beta h^2 + ...|.
 *
 * Formula: for neighbouring steps h_(k-1) > h_k, q = R/h: alpha_k = q_k - (q_(k-1) - q_k) h_k / (h_(k-1) - h_k);
 * U_k = s |alpha_k - alpha_(k-1)| + N (h_(k-1)/h_k + h_k/h_(k-1)) / (h_(k-1) - h_k), the last change and what the
 * rounding of both remainders becomes; s = 3, with two steps 10 and alpha_(k-1) = q_k. The smallest U wins, which is
 * that of the two smallest steps unless rounding has reached them. Where every remainder is within the noise, f is
 * linear along the line as far as can be seen: alpha = R/h and U = N/h at the largest step.
 *
 * Units: those of the directional derivative. Domain: at least one step; finite remainders. Throws: never.
 * NaN policy: finite input gives no NaN; what overflows is held at the largest number, or U = +Infinity.
 * Source: L. F. Richardson, Phil. Trans. R. Soc. A 210, 1911 (extrapolation to h = 0); More & Wild, SIAM J. Sci.
 * Comput. 33(3), 2011 (noise of a computed function).
 */
export function extrapolateRemainders({ steps, sizes, shrinking, usable, noise }: Remainders): Extrapolated {
  if (usable.length === 0) return { value: held(sizes[0]! / steps[0]!), uncertainty: share(noise, 1 / steps[0]!) };
  const quotients = sizes.map((size, k) => held(size / steps[k]!));
  // The first step on the rounding branch still bounds what is left: its rounding is in U.
  const last = Math.min(steps.length, shrinking + 1);
  let best: Extrapolated | null = null;
  let before: number | null = null;
  for (let k = 1; k < last; k += 1) {
    const [wide, narrow] = [steps[k - 1]!, steps[k]!];
    const value = held(quotients[k]! - (quotients[k - 1]! - quotients[k]!) * (narrow / (wide - narrow)));
    const change = Math.abs(value - (before ?? quotients[k]!));
    const rounding = share(noise, (wide / narrow + narrow / wide) / (wide - narrow));
    const uncertainty = share(change, before === null ? GUARD_OF_TWO : GUARD) + rounding;
    // The first pair alone cannot tell whether R/h bends, and serves only where there is no other.
    if (best === null || k === 2 || uncertainty < best.uncertainty) best = { value, uncertainty };
    before = value;
  }
  return best ?? { value: quotients[0]!, uncertainty: Infinity };
}

/** A product in which nothing times infinity is nothing. */
function share(size: number, factor: number): number {
  return size === 0 ? 0 : size * factor;
}

/** The nearest finite number. */
function held(value: number): number {
  return Math.max(-Number.MAX_VALUE, Math.min(Number.MAX_VALUE, value));
}
