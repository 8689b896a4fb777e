import { MAX_REFERENCES } from "../../domain/limits.ts";
import type { Tolerances } from "../../domain/tolerances.ts";
import type { BestReference, BlockNumbers } from "../types.ts";
import { NO_SOURCE } from "../types.ts";
import { combineReferences } from "./combineReferences.ts";
import type { Estimator } from "./estimator.ts";
import { prepareReference } from "./prepareReference.ts";
import { soleReference } from "./soleReference.ts";

/**
 * The best reference of every entry of a block, with its uncertainty (section 1 of the judging rules).
 *
 * Formula: per reference a value and an uncertainty U: stated; measured from a sweep (`fillSweep`); modelled from
 * method, step and precision (`stepModel`); 64 u max(|r|, floor) for methods without a step. The smallest U wins.
 * References that differ by more than the sum of their U conflict: U = +Infinity there. A complex step that is
 * exactly 0 where a difference is not (beyond its U) is set aside there, and so are its other zeros of the block
 * that a difference does not share: code that dropped an imaginary part once is not trusted with a zero again.
 * A difference that is exactly 0 where a complex step is not (beyond its U) is set aside there.
 * `sawNoChange` marks entries whose differences are all exactly 0, at least one of them made with a step that
 * could have seen a change of the entry's natural size P/L above the noise (`stepModel`).
 *
 * Shapes: rows x columns, row-major; references over their own columns. An empty block gives empty arrays.
 * Units: values and U in output unit per input unit, steps in input units.
 * Domain: any finite or not finite numbers; steps of any sign count by magnitude; sweeps in any order.
 * Throws: RangeError naming the argument whose shape is wrong.
 * NaN policy: a value that is not finite is no estimate; an entry without any has value, U = NaN and source
 * NO_SOURCE. No finite input makes U NaN otherwise; +Infinity means that the reference cannot tell.
 * Accuracy: U covered the true error of every entry of the published set of More, Garbow & Hillstrom with sweeps of
 * four steps or more (tests/numerics/published.test.ts). A single step's U assumes derivatives of the size S/L.
 * Cost: one pass over each posted value, two over a sweep's, bands of rows as scratch, nothing allocated per entry.
 * `value` is the posted array itself where one single-step reference covers the whole block: do not write to it.
 * Source: J. J. More, B. S. Garbow, K. E. Hillstrom, ACM TOMS 7(1):17-41, 1981, doi:10.1145/355934.355936 (trials);
 * the parts name their own.
 */
export function bestReference(block: BlockNumbers, tolerances: Tolerances): BestReference {
  return bestOf(block, prepareReferences(block, tolerances));
}

/** Checks the shapes of a block and makes its references ready. */
export function prepareReferences(block: BlockNumbers, tolerances: Tolerances): Estimator[] {
  checkBlock(block);
  return block.references.map((reference, k) => prepareReference(block, reference, tolerances, `references[${k}]`));
}

/** The best of references that are ready. */
export function bestOf(block: BlockNumbers, estimators: readonly Estimator[]): BestReference {
  const [sole] = estimators;
  if (sole === undefined) return unreferenced(block.rows * block.columns);
  if (estimators.length === 1 && sole.position === null) return soleReference(block, sole);
  return combineReferences(block, estimators);
}

function checkBlock(block: BlockNumbers): void {
  const { rows, columns } = block;
  if (!Number.isInteger(rows) || rows < 0) throw new RangeError(`rows: ${rows}, expected a whole number`);
  if (!Number.isInteger(columns) || columns < 0) throw new RangeError(`columns: ${columns}, expected a whole number`);
  const expect = (argument: string, array: Float64Array | null, length: number) => {
    if (array !== null && array.length !== length) {
      throw new RangeError(`${argument}: ${array.length} numbers, expected ${length}`);
    }
  };
  expect("outputValues", block.outputValues, rows);
  expect("inputValues", block.inputValues, columns);
  expect("derivative", block.derivative, rows * columns);
  if (block.references.length > MAX_REFERENCES) {
    throw new RangeError(`references: ${block.references.length}, expected at most ${MAX_REFERENCES}`);
  }
}

function unreferenced(entries: number): BestReference {
  return {
    value: new Float64Array(entries).fill(NaN),
    uncertainty: new Float64Array(entries).fill(NaN),
    largest: 0,
    source: new Uint8Array(entries).fill(NO_SOURCE),
    step: new Uint8Array(entries),
    conflict: new Uint8Array(entries),
    sawNoChange: new Uint8Array(entries),
    assumed: [],
    kinds: [],
    findings: [],
  };
}
