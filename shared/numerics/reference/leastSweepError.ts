import { UNIT_ROUNDOFF } from "../roundoff.ts";
import type { Scheme } from "./scheme.ts";
import type { SweepReader } from "./sweepReader.ts";

/** The step of a sweep that is best for one entry. */
export interface SweepChoice {
  /** Index in the reader's scratch, largest step = 0. */
  index: number;
  /** Its error E. */
  error: number;
}

/** The parts of E by step, for those who want to see the whole sweep; the first step has none. */
export interface SweepParts {
  /** T_k. */
  readonly truncation: Float64Array;
  /** c N / h_k + |D_k| (u |x| / h_k + 4u). */
  readonly rounding: Float64Array;
}

/**
 * The step k >= 2 of an entry with the least sum of truncation and rounding.
 *
 * Formula: E_k = T_k + c N / h_k + |D_k| (u |x| / h_k + 4u), with
 * T_k = max(|d_k| / ((h_(k-1)/h_k)^p - 1), |d_k - e_k|), d_k = D_k - D_(k-1), and e_k what d_k would be if d_(k-1)
 * were truncation of order p alone: Richardson's estimate, not trusted further than the differences fall as it says.
 * Shapes: the first n >= 2 values of the reader. Units: those of the entry; `noise` N those of the output.
 * Writes to `choice`, and to `parts` where they are wanted; allocates nothing.
 * Source: L. F. Richardson, Phil. Trans. R. Soc. A 210:307-357, 1911, doi:10.1098/rsta.1911.0009.
 */
export function leastSweepError(
  reader: SweepReader,
  n: number,
  scheme: Scheme,
  noise: number,
  x: number,
  choice: SweepChoice,
  parts: SweepParts | null = null,
): void {
  const { values, steps } = reader;
  choice.index = 1;
  choice.error = Infinity;
  let changeBefore = NaN;
  let spanBefore = NaN;
  for (let k = 1; k < n; k += 1) {
    const h = steps[k];
    const d = values[k];
    const ratio = steps[k - 1] / h;
    const fall = scheme.order === 1 ? ratio - 1 : ratio * ratio - 1;
    const change = d - values[k - 1];
    // Truncation C h^p makes the changes proportional to these spans, in units of the larger step of each.
    const span = scheme.order === 1 ? 1 - 1 / ratio : 1 - 1 / (ratio * ratio);
    let truncation = Math.abs(change) / fall;
    if (k > 1) {
      const before = steps[k - 2] / steps[k - 1];
      const expected = (changeBefore * span) / (spanBefore * (scheme.order === 1 ? before : before * before));
      truncation = Math.max(truncation, Math.abs(change - expected));
    }
    const rounding = Math.abs(d) * UNIT_ROUNDOFF * (x / h + 4);
    const noisy = (scheme.noisyValues * noise) / h;
    const error = truncation + noisy + rounding;
    if (parts !== null) {
      parts.truncation[k] = truncation;
      parts.rounding[k] = noisy + rounding;
    }
    if (error < choice.error) {
      choice.error = error;
      choice.index = k;
    }
    changeBefore = change;
    spanBefore = span;
  }
}
