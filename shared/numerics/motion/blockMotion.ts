import { MOTION_CODE, VERDICT_CODE } from "../../domain/vocabulary.ts";
import type { MotionCounts, MotionSide } from "../types.ts";
import { absoluteUncertainty } from "../uncertainty/absoluteUncertainty.ts";

/** Relative movement that binary64 arithmetic may make by itself. */
const STILL = 1e-12;
/** Motion code by: 1 where a moved, plus 2 where r moved, plus 4 where the entry does not agree now. */
const MOTION_OF = Uint8Array.of(
  MOTION_CODE.still,
  MOTION_CODE["derivative-only"],
  MOTION_CODE["model-only"],
  MOTION_CODE.together,
  MOTION_CODE.still,
  MOTION_CODE["derivative-only"],
  MOTION_CODE["model-only"],
  MOTION_CODE.apart,
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
  const tallies = new Float64Array(MOTION_OF.length);
  for (let row = 0; row < rows; row += 1) {
    const valueMoved = outputMoved(now.outputValues, before.outputValues, row);
    moveRow(now, before, row * columns, (row + 1) * columns, valueMoved, motion, tallies);
  }
  return {
    motion,
    counts: {
      still: tallies[MOTION_CODE.still],
      together: tallies[MOTION_CODE.together],
      "derivative-only": tallies[MOTION_CODE["derivative-only"]],
      "model-only": tallies[MOTION_CODE["model-only"]],
      apart: tallies[MOTION_CODE.apart],
    },
  };
}

function moveRow(
  now: MotionSide & { readonly verdict: Uint8Array },
  before: MotionSide,
  start: number,
  end: number,
  valueMoved: boolean,
  motion: Uint8Array,
  tallies: Float64Array,
): void {
  const { derivative, reference, resolution, floor, verdict } = now;
  for (let k = start; k < end; k += 1) {
    const a = derivative[k];
    const b = before.derivative[k];
    const r = reference[k];
    const s = before.reference[k];
    const seen = verdict[k];
    const change = Math.abs(a - b);
    const changed = a !== b && moved(a, b, change, floor);
    let modelMoved = false;
    if (r !== s || valueMoved) {
      const coarse =
        absoluteUncertainty(resolution[k], r, floor) + absoluteUncertainty(before.resolution[k], s, before.floor);
      if (Math.abs(r - s) > coarse) modelMoved = true;
      else if (valueMoved) {
        const blind = coarse !== coarse || (changed ? change <= coarse : seen === VERDICT_CODE.unresolved);
        modelMoved = blind;
      }
    }
    const code = MOTION_OF[(changed ? 1 : 0) + (modelMoved ? 2 : 0) + (seen === VERDICT_CODE.agrees ? 0 : 4)];
    motion[k] = code;
    tallies[code] += 1;
  }
}

function moved(a: number, b: number, change: number, floor: number): boolean {
  if (change < Infinity) return change > STILL * Math.max(Math.abs(a), Math.abs(b), floor);
  return a === a || b === b;
}

function outputMoved(now: Float64Array | null, before: Float64Array | null, row: number): boolean {
  if (now === null || before === null) return false;
  return now[row] !== before[row] && moved(now[row], before[row], Math.abs(now[row] - before[row]), 0);
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
