import type { Tolerances } from "../../domain/tolerances.ts";
import type { BestReference, BlockNumbers } from "../types.ts";
import { bestOf, prepareReferences } from "./bestReference.ts";
import type { Estimator, Posted } from "./estimator.ts";
import { newEstimates } from "./estimator.ts";
import { findingsOf, newFindingCounts } from "./findings.ts";
import { largestKnown } from "./largestKnown.ts";
import { markOddEntries } from "./soleReference.ts";

/** Entries of a band of rows whose uncertainty stays in the processor's cache. */
const BAND_ENTRIES = 4096;

/** The best references of a block, to be gone through in bands of rows from the first to the last. */
export interface Selection {
  readonly best: BestReference;
  readonly bandRows: number;
  /** U of rows first <= i < last, at the start of the array; good until the next call. */
  readonly uncertaintyOf: (first: number, last: number) => Float64Array;
  /** U of one entry. */
  readonly uncertaintyAt: (row: number, column: number) => number;
}

/**
 * The best references for a caller that goes through the block once. Where one single-step reference covers it, no
 * plane of uncertainties is written: each band's are worked out when it is come to, and `best.uncertainty` only if
 * someone asks for it. Else as `bestReference`.
 */
export function selectReferences(block: BlockNumbers, tolerances: Tolerances): Selection {
  const estimators = prepareReferences(block, tolerances);
  const [sole] = estimators;
  if (estimators.length === 1 && sole.position === null && sole.posted !== null) {
    return bandedSelection(block, sole, sole.posted);
  }
  const best = bestOf(block, estimators);
  const { uncertainty } = best;
  return {
    best,
    bandRows: block.rows,
    uncertaintyOf: () => uncertainty,
    uncertaintyAt: (row, column) => uncertainty[row * block.columns + column],
  };
}

function bandedSelection(block: BlockNumbers, sole: Estimator, posted: Posted): Selection {
  const { rows, columns } = block;
  const entries = rows * columns;
  const bandRows = Math.max(1, Math.floor(BAND_ENTRIES / Math.max(1, columns)));
  const band = newEstimates(Math.min(bandRows, rows) * columns, posted.values);
  const source = new Uint8Array(entries);
  const sawNoChange = new Uint8Array(entries);
  const uncertaintyOf = (first: number, last: number): Float64Array => {
    if (sole.fill(first, last, band) > 0) {
      markOddEntries(block, band, first * columns, (last - first) * columns, source, sawNoChange);
      band.unchanged.fill(0);
    }
    return band.uncertainty;
  };
  const uncertaintyAt = (row: number, column: number): number => uncertaintyOf(row, row + 1)[column];
  let plane: Float64Array | null = null;
  const uncertainty = (): Float64Array => {
    if (plane !== null) return plane;
    const estimates = newEstimates(entries, posted.values);
    sole.fill(0, rows, estimates);
    plane = estimates.uncertainty;
    return plane;
  };
  const best: BestReference = {
    value: posted.values,
    get uncertainty() {
      return uncertainty();
    },
    largest: largestOf(posted, columns, uncertaintyAt, uncertainty),
    source,
    step: new Uint8Array(entries),
    conflict: new Uint8Array(entries),
    sawNoChange,
    assumed: [sole.assumed],
    kinds: [sole.kind],
    findings: findingsOf(block, newFindingCounts(1)),
  };
  return { best, bandRows, uncertaintyOf, uncertaintyAt };
}

/** `largestKnown` of the block: nearly always its largest value, and then one look tells. */
function largestOf(
  { values, peak }: Posted,
  columns: number,
  uncertaintyAt: Selection["uncertaintyAt"],
  uncertainty: () => Float64Array,
): number {
  if (peak < 0) return 0;
  const m = Math.abs(values[peak]);
  const known = 2 * uncertaintyAt(Math.floor(peak / columns), peak % columns) <= m;
  return known ? m : largestKnown(values, uncertainty());
}
