import type { BestReference, BlockNumbers } from "../types.ts";
import { NO_SOURCE } from "../types.ts";
import type { Estimates, Estimator } from "./estimator.ts";
import { newEstimates, SAW_NO_CHANGE } from "./estimator.ts";
import { findingsOf, newFindingCounts } from "./findings.ts";
import { largestKnown } from "./largestKnown.ts";
import { isDifference } from "./scheme.ts";

/**
 * The commonest block, one reference over all columns: its estimates are the result, written once; posted values
 * of a single step are not even copied.
 */
export function soleReference(block: BlockNumbers, sole: Estimator): BestReference {
  const entries = block.rows * block.columns;
  const estimates = newEstimates(entries, sole.posted?.values);
  const source = new Uint8Array(entries);
  const sawNoChange = new Uint8Array(entries);
  if (sole.fill(0, block.rows, estimates) > 0) markOddEntries(block, estimates, 0, entries, source, sawNoChange);
  return {
    value: estimates.value,
    uncertainty: estimates.uncertainty,
    largest: largestKnown(estimates.value, estimates.uncertainty),
    source,
    step: estimates.step,
    conflict: new Uint8Array(entries),
    sawNoChange,
    assumed: [sole.assumed],
    kinds: [sole.kind],
    findings: findingsOf(block, newFindingCounts(1)),
  };
}

/** Marks, among `count` estimates that belong to the entries from `start`, those without a reference or change. */
export function markOddEntries(
  block: BlockNumbers,
  estimates: Estimates,
  start: number,
  count: number,
  source: Uint8Array,
  sawNoChange: Uint8Array,
): void {
  const difference = block.references.every((reference) => isDifference(reference.method));
  for (let k = 0; k < count; k += 1) {
    if (!(estimates.uncertainty[k] >= 0)) source[start + k] = NO_SOURCE;
    else if (difference && estimates.unchanged[k] === SAW_NO_CHANGE) sawNoChange[start + k] = 1;
  }
}
