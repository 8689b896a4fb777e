import type { ColumnModel } from "./columnModel.ts";
import type { Geometry } from "./geometry.ts";

/** Rows smaller than this beside the block's largest are another unit, not a double root: nobody looks that deep. */
const SMALLEST_ROW = 1e-9;
/** Squares in this range lose nothing to overflow or underflow. */
const SMALLEST_SQUARE = 1e-280;
const LARGEST_SQUARE = 1e280;

/**
 * Size P of each output row as a single-step difference shows it: max(|F|, root of the sum over columns of
 * (|r| L)^2), the terms that F is made of to first order, added as independent roundings add. A row whose size is
 * within what truncation would make of the block's largest (a double root: F and its slopes vanish, its curvature
 * does not) takes the block's largest size instead.
 *
 * Units: those of the output. NaN policy: values that are not finite do not count. Cost: one pass; one number a row.
 */
export function rowSizes(values: Float64Array, model: ColumnModel, sizes: Geometry): Float64Array {
  const { rows, width, lengths } = sizes;
  const result = sizes.outputs.slice();
  let largest = 0;
  for (let row = 0; row < rows; row += 1) {
    const size = Math.max(result[row], rootOfSquares(values, row * width, lengths));
    result[row] = size;
    if (size > largest && size < Infinity) largest = size;
  }
  const truncation = model.truncation.reduce((most, factor) => Math.max(most, factor), 0);
  for (let row = 0; row < rows; row += 1) {
    if (result[row] > SMALLEST_ROW * largest && result[row] <= truncation * largest) result[row] = largest;
  }
  return result;
}

/** Root of the sum of (value length)^2; where squares would overflow or vanish the plain sum, which is not less. */
function rootOfSquares(values: Float64Array, at: number, lengths: Float64Array): number {
  let squares = 0;
  for (let c = 0; c < lengths.length; c += 1) {
    const term = values[at + c] * lengths[c];
    if (term - term === 0) squares += term * term;
  }
  if (squares > SMALLEST_SQUARE && squares < LARGEST_SQUARE) return Math.sqrt(squares);
  let sum = 0;
  for (let c = 0; c < lengths.length; c += 1) {
    const term = Math.abs(values[at + c] * lengths[c]);
    if (term < Infinity) sum += term;
  }
  return Math.min(sum, Number.MAX_VALUE);
}
