import type { BlockNumbers, ReferenceNumbers } from "../types.ts";

/** Smallest characteristic length that an input is given. */
const SHORTEST_LENGTH = 0.01;
/** |F| taken where no output value is known. */
const ASSUMED_OUTPUT = 1;

/** What the covered columns and the rows of a block say about sizes. */
export interface Geometry {
  readonly rows: number;
  readonly width: number;
  /** Position of each block column among the covered ones, -1 where not covered; null = all, in order. */
  readonly position: Int32Array | null;
  /** |F| per row; 1 where unknown. */
  readonly outputs: Float64Array;
  /** |x| per covered column; 1 where unknown. */
  readonly inputs: Float64Array;
  /** Characteristic length L per covered column: |x|, or 1 where x is 0 or unknown, never below 0.01. */
  readonly lengths: Float64Array;
  readonly outputsKnown: boolean;
  readonly inputsKnown: boolean;
}

/**
 * Sizes of the rows and of the columns that a reference covers. Values that are not finite count as unknown.
 * Throws RangeError when `columns` names a column twice or one that the block has not.
 */
export function geometry(block: Omit<BlockNumbers, "derivative">, reference: ReferenceNumbers, name: string): Geometry {
  const covered = reference.columns;
  const width = covered === null ? block.columns : covered.length;
  const outputs = magnitudes(block.outputValues, block.rows, ASSUMED_OUTPUT);
  const chosen = covered === null ? block.inputValues : pick(block.inputValues, covered);
  const inputs = magnitudes(chosen, width, 1);
  return {
    rows: block.rows,
    width,
    position: covered === null ? null : positions(covered, block.columns, name),
    outputs: outputs.values,
    inputs: inputs.values,
    lengths: inputs.values.map((x) => (x === 0 ? 1 : Math.max(x, SHORTEST_LENGTH))),
    outputsKnown: outputs.known,
    inputsKnown: inputs.known,
  };
}

function pick(values: Float64Array | null, columns: Int32Array): Float64Array | null {
  return values === null ? null : Float64Array.from(columns, (column) => values[column] ?? NaN);
}

function magnitudes(
  values: Float64Array | null,
  length: number,
  unknown: number,
): { readonly values: Float64Array; readonly known: boolean } {
  if (values === null) return { values: new Float64Array(length).fill(unknown), known: length === 0 };
  let known = true;
  const sizes = values.map((value) => {
    if (Number.isFinite(value)) return Math.abs(value);
    known = false;
    return unknown;
  });
  return { values: sizes, known };
}

function positions(columns: Int32Array, count: number, name: string): Int32Array {
  const position = new Int32Array(count).fill(-1);
  columns.forEach((column, c) => {
    if (!(column >= 0 && column < count)) throw new RangeError(`${name}.columns: no column ${column} of ${count}`);
    if (position[column] !== -1) throw new RangeError(`${name}.columns: column ${column} twice`);
    position[column] = c;
  });
  return position;
}
