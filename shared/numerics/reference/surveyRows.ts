import type { ColumnModel } from "./columnModel.ts";
import type { Geometry } from "./geometry.ts";

/** What the values of a single-step difference say of the rows. */
export interface RowsSurvey {
  /** Size P of each row, in the unit of the output, never 0. */
  readonly sizes: Float64Array;
  /** Largest |value|, Infinity included; -1 where all are NaN. */
  readonly largest: number;
  /** The row where it is. */
  readonly row: number;
}

/** Rows smaller than this beside the block's largest are another unit, not a double root: nobody looks that deep. */
const SMALLEST_ROW = 1e-9;
/** Sums of squares in this range lost nothing to overflow or underflow. */
const SMALLEST_SQUARES = 1e-280;
const LARGEST_SQUARES = 1e280;

/**
 * Size P of each output row as a single-step difference shows it: max(|F|, root of the sum over columns of
 * (|r| L)^2), the terms that F is made of to first order, added as independent roundings add. A row whose size is
 * within what truncation would make of the block's largest (a double root: F and its slopes vanish, its curvature
 * does not) takes the block's largest size instead.
 *
 * Units: those of the output. NaN policy: values that are not finite do not count in the sizes. Cost: one pass; one
 * number a row is allocated.
 */
export function surveyRows(values: Float64Array, model: ColumnModel, geometry: Geometry): RowsSurvey {
  const { rows, width, lengths } = geometry;
  const sizes = geometry.outputs.slice();
  const seen = { squares: 0, largest: -1 };
  let largest = -1;
  let where = -1;
  let largestSize = 0;
  for (let row = 0; row < rows; row += 1) {
    squaresOfRow(values, row * width, lengths, seen);
    if (seen.largest > largest) {
      largest = seen.largest;
      where = row;
    }
    const sound = seen.squares > SMALLEST_SQUARES && seen.squares < LARGEST_SQUARES;
    const root = sound ? Math.sqrt(seen.squares) : carefulRoot(values, row * width, lengths);
    sizes[row] = Math.max(sizes[row], root, Number.MIN_VALUE);
    largestSize = Math.max(largestSize, sizes[row]);
  }
  const truncation = model.truncation.reduce((most, factor) => Math.max(most, factor), 0);
  for (let row = 0; row < rows; row += 1) {
    if (sizes[row] > SMALLEST_ROW * largestSize && sizes[row] <= truncation * largestSize) sizes[row] = largestSize;
  }
  return { sizes, largest, row: where };
}

/** Sum of (value length)^2 and largest |value| of one row. */
function squaresOfRow(
  values: Float64Array,
  at: number,
  lengths: Float64Array,
  seen: { squares: number; largest: number },
): void {
  // Two running sums: one would wait for itself at every addition.
  let even = 0;
  let odd = 0;
  let largest = seen.largest;
  const count = lengths.length;
  for (let c = 1; c < count; c += 2) {
    const first = values[at + c - 1];
    const second = values[at + c];
    even += (first * lengths[c - 1]) ** 2;
    odd += (second * lengths[c]) ** 2;
    if (Math.abs(first) > largest) largest = Math.abs(first);
    if (Math.abs(second) > largest) largest = Math.abs(second);
  }
  if (count % 2 === 1) {
    const last = values[at + count - 1];
    even += (last * lengths[count - 1]) ** 2;
    if (Math.abs(last) > largest) largest = Math.abs(last);
  }
  seen.squares = even + odd;
  seen.largest = largest;
}

/** Root where something is not finite, or squares overflow or vanish: then the plain sum, which is not less. */
function carefulRoot(values: Float64Array, at: number, lengths: Float64Array): number {
  let squares = 0;
  let sum = 0;
  for (let c = 0; c < lengths.length; c += 1) {
    const term = Math.abs(values[at + c] * lengths[c]);
    if (!(term < Infinity)) continue;
    squares += term * term;
    sum += term;
  }
  const sound = squares > SMALLEST_SQUARES && squares < LARGEST_SQUARES;
  return sound ? Math.sqrt(squares) : Math.min(sum, Number.MAX_VALUE);
}
