import type { Geometry } from "./geometry.ts";
import type { SweepReader } from "./sweepReader.ts";

/** Fewest steps of an entry that tell its noise from its truncation. */
export const NOISE_STEPS = 4;

/** What the sweeps over one output row say together, in the unit of the output. */
export interface RowSurvey {
  /** Largest noise seen in a value of F. */
  noise: number;
  /** Size P of the row, as in `rowSizes`. */
  size: number;
}

/**
 * Noise and size of one output row, pooled over its columns: one column can look quiet by luck, a row cannot.
 *
 * Formula: q ends the smallest consecutive difference |D_q - D_(q-1)| of a column; noise = max over j, k of
 * |D_k - D_q| h_k / c over the columns with at least four steps and the steps k smaller than h_q, c noisy values
 * over h_k; size = max(|F|, root of the sum over columns of (|D_q| L)^2).
 * NaN policy: values that are not finite are left out. Writes to `survey`, allocates nothing.
 * Source: after J. J. More, S. M. Wild, Estimating computational noise, SIAM J. Sci. Comput. 33(3):1292-1314, 2011,
 * doi:10.1137/100786125, in a cheap form.
 */
export function surveyRow(
  reader: SweepReader,
  row: number,
  sizes: Geometry,
  noisyValues: number,
  survey: RowSurvey,
): void {
  const { values, steps } = reader;
  const { width, lengths } = sizes;
  let noise = 0;
  // The sum of squares is kept relative to the largest term, so that it neither overflows nor vanishes.
  let largest = 0;
  let squares = 0;
  for (let c = 0; c < width; c += 1) {
    const n = reader.read(row * width + c, c);
    if (n === 0) continue;
    const q = quietest(values, n);
    const settled = values[q];
    const term = Math.abs(settled) * lengths[c];
    if (term > largest) {
      squares = squares * (largest / term) ** 2 + 1;
      largest = term;
    } else if (largest > 0) squares += (term / largest) ** 2;
    if (n < NOISE_STEPS) continue;
    for (let k = q + 1; k < n; k += 1) {
      const seen = (Math.abs(values[k] - settled) * steps[k]) / noisyValues;
      if (seen > noise) noise = seen;
    }
  }
  survey.noise = noise;
  survey.size = Math.max(sizes.outputs[row], Math.min(largest * Math.sqrt(squares), Number.MAX_VALUE));
}

/** Index that ends the smallest consecutive difference; 0 where there is only one value. */
function quietest(values: Float64Array, n: number): number {
  let q = n > 1 ? 1 : 0;
  let least = Infinity;
  for (let k = 1; k < n; k += 1) {
    const change = Math.abs(values[k] - values[k - 1]);
    if (change < least) {
      least = change;
      q = k;
    }
  }
  return q;
}
