import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import type { Verdict } from "../../shared/domain/vocabulary.ts";
import { absoluteUncertainty } from "../../shared/numerics/uncertainty/absoluteUncertainty.ts";
import { relativeError } from "../../shared/numerics/verdict/relativeError.ts";
import type { SparsePlane } from "./readPlanes.ts";

/** The planes that tell what an entry is. */
export const ENTRY_PLANES = ["derivative", "reference", "resolution", "verdict"] as const;
export type EntryPlanes = Record<(typeof ENTRY_PLANES)[number], SparsePlane>;

/** One entry of a judged block; NaN where there is no such number. */
export interface EntryValues {
  readonly derivative: number;
  readonly reference: number;
  /** Absolute, in the unit of the entry. */
  readonly uncertainty: number;
  /** Relative. */
  readonly error: number;
  readonly verdict: Verdict;
}

/** `entry` is the flat index, `floor` that of the snapshot. */
export function entryValuesAt(planes: EntryPlanes, entry: number, floor: number): EntryValues {
  const derivative = planes.derivative.at(entry);
  const reference = planes.reference.at(entry);
  return {
    derivative,
    reference,
    uncertainty: absoluteUncertainty(planes.resolution.at(entry), reference, floor),
    error: relativeError(derivative, reference, floor),
    verdict: VERDICTS[planes.verdict.at(entry)],
  };
}
