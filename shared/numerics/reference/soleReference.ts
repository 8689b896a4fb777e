import type { BestReference, BlockNumbers } from "../types.ts";
import { NO_SOURCE } from "../types.ts";
import type { Estimator } from "./estimator.ts";
import { newEstimates, SAW_NO_CHANGE } from "./estimator.ts";
import { findingsOf, newFindingCounts } from "./findings.ts";
import { isDifference } from "./scheme.ts";

/**
 * The commonest block, one reference over all columns: its estimates are the result, written once; posted values
 * of a single step are not even copied.
 */
export function soleReference(block: BlockNumbers, sole: Estimator): BestReference {
  const entries = block.rows * block.columns;
  const estimates = newEstimates(entries, sole.posted ?? undefined);
  const { odd, largest } = sole.fill(0, block.rows, estimates);
  const source = new Uint8Array(entries);
  const sawNoChange = estimates.unchanged;
  let { value } = estimates;
  const difference = block.references.every((reference) => isDifference(reference.method));
  for (let k = 0; k < entries && odd > 0; k += 1) {
    if (sawNoChange[k] !== 0) sawNoChange[k] = difference && sawNoChange[k] === SAW_NO_CHANGE ? 1 : 0;
    if (estimates.uncertainty[k] >= 0) continue;
    source[k] = NO_SOURCE;
    if (Number.isNaN(value[k])) continue;
    if (value === sole.posted) value = value.slice();
    value[k] = NaN;
  }
  return {
    value,
    uncertainty: estimates.uncertainty,
    largest,
    source,
    step: estimates.step,
    conflict: new Uint8Array(entries),
    sawNoChange,
    assumed: [sole.assumed],
    kinds: [sole.kind],
    findings: findingsOf(block, newFindingCounts(1)),
  };
}
