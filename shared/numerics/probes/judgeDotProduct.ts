import { DEFAULT_PRECISION } from "../roundoff.ts";
import { relativeError } from "../verdict/relativeError.ts";
import { decideProbe } from "./decideProbe.ts";
import { gamma } from "./gamma.ts";
import { shown } from "./shown.ts";
import type { DotProductProbe, JudgedProbe } from "./types.ts";

/** Relative tolerance where rounding asks for no more. */
const TOLERANCE = 1e-10;

/**
 * Do forward and reverse mode deliver the same derivative? The dot-product test <w, J v> = <J^T w, v>.
 *
 * Formula: d = |forward - reverse|, S = max(|forward|, |reverse|, scale). Each side may be off by gamma_n S through
 * rounding alone, n = output size + input size, so U = 2 gamma_n S; T = tol S with tol = max(1e-10, 4 gamma_n), so that
 * two sides that differ by rounding alone always agree. `agrees` if d + U <= T, `disagrees` if d - U > T, else
 * `unresolved`; always `unresolved` where 4 gamma_n >= 1. u = precision / 2, at least 2^-53.
 *
 * Units: forward, reverse, scale, U and floor S in the unit of the sums; tolerance and error dimensionless.
 * Domain: any numbers; scale >= 0. Throws: never.
 * NaN policy: `invalid` where forward or reverse is not finite.
 * Accuracy: gamma_n is a worst case: 2,000 random trials used at most a third of it. Without `scale` S is that of the
 * results, which is too small where terms cancel (`assumed`).
 * Source: N. J. Higham, Accuracy and Stability of Numerical Algorithms, 2nd ed., SIAM 2002, section 3.1; J. F. Claerbout,
 * Earth Soundings Analysis: Processing versus Inversion, Stanford 1992 (the test, and what single precision allows).
 */
export function judgeDotProduct(probe: DotProductProbe): JudgedProbe {
  const { forward, reverse, scale } = probe;
  const assumed = scale === null;
  if (!Number.isFinite(forward) || !Number.isFinite(reverse)) return notFinite(assumed);
  const floor = Math.max(Math.abs(forward), Math.abs(reverse), scale ?? 0);
  const rounding = gamma(probe.length, Math.max(probe.precision ?? 0, DEFAULT_PRECISION) / 2);
  const blind = 4 * rounding >= 1;
  const tolerance = blind ? 1 : Math.max(TOLERANCE, 4 * rounding);
  const error = relativeError(forward, reverse, floor);
  const verdict = decideProbe(error, blind ? Infinity : 2 * rounding, tolerance);
  return {
    verdict,
    derivative: forward,
    reference: reverse,
    uncertainty: blind ? Infinity : 2 * rounding * floor,
    floor,
    error,
    tolerance,
    assumed,
    sentence: sentenceOf(verdict, error, tolerance),
  };
}

function sentenceOf(verdict: JudgedProbe["verdict"], error: number, tolerance: number): string {
  const allowed = `${shown(tolerance)} is allowed`;
  if (verdict === "unresolved") {
    return `forward and reverse differ by ${shown(error)} of their size, which rounding may explain or not`;
  }
  if (error === 0) return "forward and reverse are the same to the last bit";
  const differ = `forward and reverse differ by ${shown(error)} of their size`;
  return verdict === "agrees" ? `${differ}, within rounding: ${allowed}` : `${differ}, ${allowed}`;
}

function notFinite(assumed: boolean): JudgedProbe {
  return {
    verdict: "invalid",
    derivative: NaN,
    reference: NaN,
    uncertainty: NaN,
    floor: 0,
    error: NaN,
    tolerance: null,
    assumed,
    sentence: "forward or reverse is not a finite number",
  };
}
