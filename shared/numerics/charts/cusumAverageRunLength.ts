import { normalProbability } from "./normalProbability.ts";

export interface CusumDesign {
  /** Allowance and decision interval, in standard deviations. */
  readonly k: number;
  readonly h: number;
  /** Shift of the mean, in standard deviations. */
  readonly shift: number;
  /** States that the sum's range is cut into; the error falls with their square. */
  readonly states: number;
  /** Sum to start from (fast initial response), 0 by default. */
  readonly headStart?: number;
}

/**
 * Average run length of the one-sided tabular CUSUM of independent normal values: the number of values, on average,
 * until S = max(0, S + x - k) exceeds h.
 *
 * Formula: S is taken for the middle of the interval it lies in, t intervals of width w = 2h/(2t - 1) about 0, w, 2w,
 * ...; with the matrix R of their transitions, (I - R) L = 1, and L(s) = 1 + sum_j P(s -> j) L_j for the start s.
 * A two-sided chart has 1/L = 1/L+ + 1/L-, L- at the opposite shift.
 * Units: standard deviations; values until the signal, that one included. Domain: h > 0, 0 <= headStart <= h, any k
 * and shift; states a whole number >= 2. Throws: RangeError naming the argument.
 * NaN policy: NaN in k or shift throws. Accuracy: 0.1 % with 100 states for k = 1/2 and h up to 5; the longer the run,
 * the more states it needs (300 for 0.1 % of 2,072 at k = 0, h = 10, shift -1/4).
 * Cost: states^3 / 3 multiplications, states^2 numbers.
 * Source: D. Brook, D. A. Evans, An approach to the probability distribution of cusum run length, Biometrika
 * 59:539-549, 1972.
 */
export function cusumAverageRunLength({ k, h, shift, states, headStart = 0 }: CusumDesign): number {
  if (!(h > 0 && h < Infinity)) throw new RangeError(`h: ${h}, expected a finite number > 0`);
  if (!Number.isFinite(k)) throw new RangeError(`k: ${k}, expected a finite number`);
  if (!Number.isFinite(shift)) throw new RangeError(`shift: ${shift}, expected a finite number`);
  if (!(headStart >= 0 && headStart <= h)) throw new RangeError(`headStart: ${headStart}, expected 0 to ${h}`);
  if (!Number.isInteger(states) || states < 2) throw new RangeError(`states: ${states}, expected a whole number >= 2`);
  const width = (2 * h) / (2 * states - 1);
  const transitions = (sum: number): Float64Array => transitionsFrom(sum, shift - k, width, states);
  const lengths = runLengths(Array.from({ length: states }, (_, i) => transitions(i * width)));
  return transitions(headStart).reduce((total, probability, j) => total + probability * lengths[j], 1);
}

/** Probabilities that the sum goes on to each state. */
function transitionsFrom(sum: number, drift: number, width: number, states: number): Float64Array {
  const upTo = (j: number): number => normalProbability((j + 0.5) * width - sum - drift);
  return Float64Array.from({ length: states }, (_, j) => upTo(j) - (j === 0 ? 0 : upTo(j - 1)));
}

/** Solves (I - R) L = 1 by elimination; the matrix is diagonally dominant, so no rows are exchanged. */
function runLengths(transitions: Float64Array[]): Float64Array {
  const size = transitions.length;
  const rows = transitions.map((row, i) => row.map((probability, j) => (i === j ? 1 : 0) - probability));
  const lengths = new Float64Array(size).fill(1);
  for (let p = 0; p < size; p += 1) {
    for (let i = p + 1; i < size; i += 1) {
      const factor = rows[i][p] / rows[p][p];
      for (let j = p; j < size; j += 1) rows[i][j] -= factor * rows[p][j];
      lengths[i] -= factor * lengths[p];
    }
  }
  for (let p = size - 1; p >= 0; p -= 1) {
    for (let j = p + 1; j < size; j += 1) lengths[p] -= rows[p][j] * lengths[j];
    lengths[p] /= rows[p][p];
  }
  return lengths;
}
