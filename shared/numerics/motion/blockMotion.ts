import { MOTION_CODE, MOTIONS, VERDICT_CODE } from "../../domain/vocabulary.ts";
import { floored } from "../floored.ts";
import type { MotionCounts, MotionSide } from "../types.ts";

/** Relative movement that binary64 arithmetic may make by itself. */
const STILL = 1e-12;
const { agrees, unresolved } = VERDICT_CODE;
const { still, together, apart } = MOTION_CODE;
const DERIVATIVE_ONLY = MOTION_CODE["derivative-only"];
const MODEL_ONLY = MOTION_CODE["model-only"];
/** Motion by whether a moved (4), r moved (2) and the entry agrees now (1): a look-up where a branch would guess. */
const MOTION_OF = Uint8Array.of(
  still,
  still,
  MODEL_ONLY,
  MODEL_ONLY,
  DERIVATIVE_ONLY,
  DERIVATIVE_ONLY,
  apart,
  together,
);

/**
 * Motion of every entry of a block since the previous judged build of its lane (section 3 of the judging rules).
 *
 * Formula: a moved if |a - a'| > 1e-12 max(|a|, |a'|, floor). r moved if |r - r'| > U + U'; or, where the references
 * cannot tell, if F of the row moved by more than 1e-12 max(|F|, |F'|). References cannot tell where one is missing;
 * where a moved, by no more than U + U'; where a did not move, while the entry is unresolved now.
 * `still` neither moved, `derivative-only`, `model-only`; both: `together` if the entry agrees now, else `apart`.
 *
 * Shapes: planes rows x columns, row-major; `outputValues` one number a row or null (then F tells nothing).
 * Units: values, floor and U = resolution max(|r|, floor) in the unit of the entries.
 * Throws: RangeError naming the argument whose length is not rows x columns, or not rows.
 * NaN policy: a NaN or infinity on both sides alike has not moved, one against another number has. A reference that
 * is NaN on either side is missing.
 * Accuracy: U from the record is not below the U judged with, but for its last bit. Cost: one pass, one byte an entry.
 * Source: section 3 of the judging rules.
 */
export function blockMotion(
  now: MotionSide & { readonly verdict: Uint8Array },
  before: MotionSide,
  rows: number,
  columns: number,
): { motion: Uint8Array; counts: MotionCounts } {
  checkSide("now", now, rows, columns);
  checkSide("before", before, rows, columns);
  expectLength("now.verdict", now.verdict.length, rows * columns);
  const motion = new Uint8Array(rows * columns);
  const counts = new Uint32Array(MOTIONS.length);
  for (let row = 0; row < rows; row += 1) {
    const valueMoved = outputMoved(now.outputValues, before.outputValues, row);
    moveRow(now, before, row * columns, (row + 1) * columns, valueMoved, motion, counts);
  }
  return {
    motion,
    counts: {
      still: motion.length - counts[together] - counts[DERIVATIVE_ONLY] - counts[MODEL_ONLY] - counts[apart],
      together: counts[together],
      "derivative-only": counts[DERIVATIVE_ONLY],
      "model-only": counts[MODEL_ONLY],
      apart: counts[apart],
    },
  };
}

/** One row, start <= k < end; `motion` is all `still` before, and so is left alone up to the first change. */
function moveRow(
  now: MotionSide & { readonly verdict: Uint8Array },
  before: MotionSide,
  start: number,
  end: number,
  valueMoved: boolean,
  motion: Uint8Array,
  counts: Uint32Array,
): void {
  const { derivative, reference, resolution, floor, verdict } = now;
  const { derivative: derivativeBefore, reference: referenceBefore, resolution: resolutionBefore } = before;
  const floorBefore = before.floor;
  // Counted in variables: a number in memory that every entry adds to makes each entry wait for the one before.
  let derivatives = 0;
  let models = 0;
  let boths = 0;
  let followed = 0;
  const first = valueMoved ? start : firstChange(now, before, start, end);
  for (let k = first; k < end; k += 1) {
    const a = derivative[k];
    const b = derivativeBefore[k];
    const r = reference[k];
    const s = referenceBefore[k];
    const change = Math.abs(a - b);
    // A change well above the limit is the common one; what is not is looked at closely.
    let changed = Number(change > STILL * (Math.abs(a) + Math.abs(b) + floor));
    if (changed === 0 && change !== 0) changed = Number(moved(a, b, change, floor));
    const coarse =
      resolution[k] * floored(Math.abs(r), floor) + resolutionBefore[k] * floored(Math.abs(s), floorBefore);
    let modelMoved = Number(Math.abs(r - s) > coarse);
    if (valueMoved) modelMoved |= changed === 1 ? 1 - Number(change > coarse) : cannotTell(coarse, verdict[k]);
    const agreed = Number(verdict[k] === agrees);
    const both = changed & modelMoved;
    motion[k] = MOTION_OF[4 * changed + 2 * modelMoved + agreed];
    derivatives += changed;
    models += modelMoved;
    boths += both;
    followed += both & agreed;
  }
  counts[DERIVATIVE_ONLY] += derivatives - boths;
  counts[MODEL_ONLY] += models - boths;
  counts[together] += followed;
  counts[apart] += boths - followed;
}

/** First entry of a row that is not the same number on both sides: most rows of most builds have none. */
function firstChange(now: MotionSide, before: MotionSide, start: number, end: number): number {
  const { derivative, reference } = now;
  const { derivative: derivativeBefore, reference: referenceBefore } = before;
  let k = start;
  while (k < end && derivative[k] === derivativeBefore[k] && reference[k] === referenceBefore[k]) k += 1;
  return k;
}

/** 1 where the reference could not say whether the model moved under a derivative that did not, else 0. */
function cannotTell(coarse: number, verdict: number): number {
  return Number(Number.isNaN(coarse) || verdict === unresolved);
}

/** True where b is not a but for rounding. */
function moved(a: number, b: number, change: number, floor: number): boolean {
  if (!(change < Infinity)) return a !== b && (a === a || b === b);
  return change > STILL * Math.max(Math.abs(a), Math.abs(b), floor);
}

function outputMoved(now: Float64Array | null, before: Float64Array | null, row: number): boolean {
  if (now === null || before === null) return false;
  return moved(now[row], before[row], Math.abs(now[row] - before[row]), 0);
}

function checkSide(name: string, side: MotionSide, rows: number, columns: number): void {
  expectLength(`${name}.derivative`, side.derivative.length, rows * columns);
  expectLength(`${name}.reference`, side.reference.length, rows * columns);
  expectLength(`${name}.resolution`, side.resolution.length, rows * columns);
  if (side.outputValues !== null) expectLength(`${name}.outputValues`, side.outputValues.length, rows);
}

function expectLength(argument: string, length: number, expected: number): void {
  if (length !== expected) throw new RangeError(`${argument}: ${length} numbers, expected ${expected}`);
}
