import type { Tolerances } from "../../domain/tolerances.ts";
import { VERDICT_CODE } from "../../domain/vocabulary.ts";
import { isDifference } from "../reference/scheme.ts";
import type { Selection } from "../reference/selectReferences.ts";
import { selectReferences } from "../reference/selectReferences.ts";
import type { BestReference, BlockNumbers, JudgedBlock, VerdictCounts, WorstEntry } from "../types.ts";
import { NO_SOURCE } from "../types.ts";
import { blockFloor } from "./blockFloor.ts";
import type { Decision, Tally } from "./decideEntries.ts";
import { decideEntries, newTally } from "./decideEntries.ts";
import { relativeError } from "./relativeError.ts";

/** A modelled difference rests on assumed curvature, so it accuses only beyond so many times its U. */
const MODEL_GUARD = 10;

/**
 * Verdict of every entry of a block (section 2 of the judging rules), with the references chosen as in
 * `bestReference`.
 *
 * Formula: d = |a - r|, T = rtol max(|r|, floor), floor as in `blockFloor`. `agrees` if d + U <= T; `disagrees` if
 * d - g U > T, g = 10 where U is that of a difference at a single step (modelled, not measured), else 1; otherwise
 * `unresolved`. `agrees` also where a is exactly 0 and the differences saw no change. Conflicting references leave
 * an entry `unresolved`; `unreferenced` without a reference; `invalid` where a is not finite.
 * resolution = U / max(|r|, floor), rounded up to binary32.
 *
 * Shapes: rows x columns, row-major; an empty block has no worst entry. Units: rtol, floorRel and resolution
 * dimensionless, floorAbs and floor in the unit of the entries. Domain: any numbers; rtol, floors >= 0.
 * Throws: RangeError naming the argument whose shape is wrong.
 * NaN policy: resolution NaN = unreferenced, +Infinity = cannot tell; finite input never gives a NaN comparison:
 * |a - r| beyond the binary64 range is compared at half scale, max(|r|, floor) = 0 is compared exactly.
 * Accuracy: verdicts use the binary64 U, not the rounded resolution. On the published set no right entry was called
 * wrong at rtol 1e-6 by any reference, and no entry wrong by more than ten tolerances `agrees`.
 * Cost: one pass after the references', five bytes written an entry, nothing allocated per entry.
 * Source: JCGM 106:2012, Evaluation of measurement data - The role of measurement uncertainty in conformity
 * assessment; ISO 14253-1:2017 (the three-way rule with U as guard band on both sides).
 */
export function judgeBlock(block: BlockNumbers, tolerances: Tolerances): JudgedBlock {
  const { rows, columns } = block;
  const selection = selectReferences(block, tolerances);
  const { best, bandRows } = selection;
  const floor = blockFloor(best, tolerances);
  const decision: Decision = {
    derivative: block.derivative,
    best,
    rtol: tolerances.rtol,
    floor,
    guards: guardsOf(block, best),
    verdict: new Uint8Array(rows * columns),
    resolution: new Float32Array(rows * columns),
    tally: newTally(),
  };
  for (let first = 0; first < rows; first += bandRows) {
    const last = Math.min(rows, first + bandRows);
    decideEntries(decision, selection.uncertaintyOf(first, last), first * columns, last * columns);
  }
  const { verdict, resolution, tally } = decision;
  return {
    best,
    verdict,
    resolution,
    floor,
    tolerances,
    counts: countsOf(rows * columns, tally),
    worst: tally.worst < 0 ? null : entryAt(tally.worst, columns, decision, selection),
  };
}

function countsOf(entries: number, { counts }: Tally): VerdictCounts {
  return {
    entries,
    agrees: counts[VERDICT_CODE.agrees],
    disagrees: counts[VERDICT_CODE.disagrees],
    unresolved: counts[VERDICT_CODE.unresolved],
    unreferenced: counts[VERDICT_CODE.unreferenced],
    invalid: counts[VERDICT_CODE.invalid],
  };
}

/** Guard factor g by source byte. */
function guardsOf(block: BlockNumbers, best: BestReference): Float64Array {
  const guards = new Float64Array(NO_SOURCE + 1).fill(1);
  block.references.forEach((reference, k) => {
    if (best.kinds[k] === "modelled" && isDifference(reference.method)) guards[k] = MODEL_GUARD;
  });
  return guards;
}

function entryAt(k: number, columns: number, decision: Decision, selection: Selection): WorstEntry {
  const row = Math.floor(k / columns);
  const column = k % columns;
  const derivative = decision.derivative[k];
  const reference = decision.best.value[k];
  return {
    row,
    column,
    error: relativeError(derivative, reference, decision.floor),
    derivative,
    reference,
    uncertainty: selection.uncertaintyAt(row, column),
  };
}
