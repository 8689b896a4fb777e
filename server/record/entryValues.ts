import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import type { Verdict } from "../../shared/domain/vocabulary.ts";
import { absoluteUncertainty } from "../../shared/numerics/uncertainty/absoluteUncertainty.ts";
import { relativeError } from "../../shared/numerics/verdict/relativeError.ts";
import { toWire, toWireOrNull } from "../../shared/schemas/common.ts";
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

/** What the four numbers in the record say; `floor` is that of the snapshot. */
export function entryValuesOf(
  stored: Readonly<Record<(typeof ENTRY_PLANES)[number], number>>,
  floor: number,
): EntryValues {
  const { derivative, reference, resolution, verdict } = stored;
  return {
    derivative,
    reference,
    uncertainty: absoluteUncertainty(resolution, reference, floor),
    error: relativeError(derivative, reference, floor),
    verdict: VERDICTS[verdict],
  };
}

/** `entry` is the flat index. */
export function entryValuesAt(planes: EntryPlanes, entry: number, floor: number): EntryValues {
  const { derivative, reference, resolution, verdict } = planes;
  return entryValuesOf(
    {
      derivative: derivative.at(entry),
      reference: reference.at(entry),
      resolution: resolution.at(entry),
      verdict: verdict.at(entry),
    },
    floor,
  );
}

/** As the API tells them: null where there is no such number. */
export function presentEntryValues({ derivative, reference, uncertainty, error, verdict }: EntryValues) {
  return {
    derivative: toWire(derivative),
    reference: toWireOrNull(reference),
    uncertainty: toWireOrNull(uncertainty),
    error: toWireOrNull(error),
    verdict,
  };
}
