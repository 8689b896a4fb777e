import type { BestReference, BlockNumbers } from "../types.ts";
import { NO_SOURCE } from "../types.ts";
import type { Estimates, Estimator } from "./estimator.ts";
import { CHANGED, newEstimates, SAW_NO_CHANGE } from "./estimator.ts";
import type { FindingCounts } from "./findings.ts";
import { findingsOf, newFindingCounts } from "./findings.ts";
import { largestKnown } from "./largestKnown.ts";
import { isDifference } from "./scheme.ts";

/** Entries of a band of rows: its scratch stays in the processor's cache. */
const BAND_ENTRIES = 4096;

type Planes = Pick<BestReference, "value" | "uncertainty" | "source" | "step" | "conflict" | "sawNoChange">;

/** One reference within the combination. */
interface Member {
  readonly estimator: Estimator;
  readonly difference: boolean;
  readonly complex: boolean;
  readonly band: Estimates;
  /** True once the reference is known to have dropped an imaginary part somewhere in the block. */
  distrusted: boolean;
}

/**
 * Several references, or one over some columns: per entry the one with the smallest U, unless they conflict.
 * All pairs are within the sum of their U exactly when the intervals r +- U have a point in common, so one running
 * intersection tells conflicts without looking at pairs.
 */
export function combineReferences(block: BlockNumbers, estimators: readonly Estimator[]): BestReference {
  const { rows, columns } = block;
  const entries = rows * columns;
  const bandRows = Math.max(1, Math.floor(BAND_ENTRIES / Math.max(1, columns)));
  const members = estimators.map((estimator, k): Member => {
    const method = block.references[k]?.method ?? "analytic";
    return {
      estimator,
      difference: isDifference(method),
      complex: method === "complex-step",
      band: newEstimates(Math.min(bandRows, rows) * estimator.width),
      distrusted: false,
    };
  });
  const planes: Planes = {
    value: new Float64Array(entries),
    uncertainty: new Float64Array(entries),
    source: new Uint8Array(entries),
    step: new Uint8Array(entries),
    conflict: new Uint8Array(entries),
    sawNoChange: new Uint8Array(entries),
  };
  let counts = combine(rows, columns, bandRows, members, planes);
  members.forEach((member, k) => {
    member.distrusted = (counts.droppedImaginary[k] ?? 0) > 0;
  });
  if (members.some((member) => member.distrusted)) counts = combine(rows, columns, bandRows, members, planes);
  return {
    ...planes,
    largest: largestKnown(planes.value, planes.uncertainty),
    assumed: estimators.map((estimator) => estimator.assumed),
    kinds: estimators.map((estimator) => estimator.kind),
    findings: findingsOf(block, counts),
  };
}

function combine(
  rows: number,
  columns: number,
  bandRows: number,
  members: readonly Member[],
  planes: Planes,
): FindingCounts {
  const counts = newFindingCounts(members.length);
  for (let first = 0; first < rows; first += bandRows) {
    const last = Math.min(rows, first + bandRows);
    for (const { estimator, band } of members) {
      band.step.fill(0);
      band.unchanged.fill(0);
      estimator.fill(first, last, band);
    }
    for (let row = first; row < last; row += 1) {
      for (let column = 0; column < columns; column += 1) {
        decide(members, row - first, column, row * columns + column, planes, counts);
      }
    }
  }
  return counts;
}

/** Index of an entry in a member's band, -1 where the member does not cover the column. */
function indexIn(member: Member, row: number, column: number): number {
  const { position, width } = member.estimator;
  const p = position === null ? column : position[column];
  return p < 0 ? -1 : row * width + p;
}

function decide(
  members: readonly Member[],
  row: number,
  column: number,
  at: number,
  planes: Planes,
  counts: FindingCounts,
): void {
  // What each kind of reference sees beyond its own uncertainty.
  let complexSees = false;
  let differenceSees = false;
  let otherSees = false;
  let differenceChanged = false;
  let differenceQuiet = false;
  for (let k = 0; k < members.length; k += 1) {
    const member = members[k] as Member;
    const index = indexIn(member, row, column);
    if (index < 0) continue;
    const u = member.band.uncertainty[index];
    const sees = Math.abs(member.band.value[index]) > u;
    if (member.complex) complexSees ||= sees;
    else if (!member.difference) otherSees ||= sees;
    else if (u >= 0) {
      differenceSees ||= sees;
      differenceChanged ||= member.band.unchanged[index] === CHANGED;
      differenceQuiet ||= member.band.unchanged[index] === SAW_NO_CHANGE;
    }
  }
  let best = NO_SOURCE;
  let value = NaN;
  let least = NaN;
  let step = 0;
  let low = -Infinity;
  let high = Infinity;
  for (let k = 0; k < members.length; k += 1) {
    const member = members[k] as Member;
    const index = indexIn(member, row, column);
    if (index < 0) continue;
    const r = member.band.value[index];
    const u = member.band.uncertainty[index];
    if (!(u >= 0)) continue;
    if (member.complex && r === 0 && (differenceSees || (member.distrusted && differenceChanged))) {
      counts.droppedImaginary[k] = counts.droppedImaginary[k] + 1;
      continue;
    }
    if (member.difference && complexSees && member.band.unchanged[index] !== CHANGED) {
      counts.sawNoChange[k] = counts.sawNoChange[k] + 1;
      continue;
    }
    if (best === NO_SOURCE || u < least) {
      best = k;
      value = r;
      least = u;
      step = member.band.step[index];
    }
    low = Math.max(low, r - u);
    high = Math.min(high, r + u);
  }
  const conflict = low > high;
  if (conflict) counts.conflicts += 1;
  planes.value[at] = value;
  planes.uncertainty[at] = conflict ? Infinity : least;
  planes.source[at] = best;
  planes.step[at] = step;
  planes.conflict[at] = conflict ? 1 : 0;
  const quiet = differenceQuiet && !differenceChanged && !complexSees && !otherSees && !conflict;
  planes.sawNoChange[at] = quiet ? 1 : 0;
}
