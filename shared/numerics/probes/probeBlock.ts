import { VERDICT_CODE } from "../../domain/vocabulary.ts";
import type { BlockNumbers, JudgedBlock, VerdictCounts } from "../types.ts";
import { NO_SOURCE } from "../types.ts";
import { roundUp } from "./roundUp.ts";
import type { JudgedProbe } from "./types.ts";

/** A probe of one number as the block of one entry that it is recorded as. */
export interface ProbeBlock {
  readonly numbers: BlockNumbers;
  readonly judged: JudgedBlock;
}

/**
 * Puts a judged probe into the shape of a judged block, so that the record, tracing and history need not know of
 * probes: the entry at row 0, column 0 has the probe's numbers and its verdict, the block its floor, and no reference
 * of its own is named.
 *
 * Formula: resolution = U / floor, rounded up to binary32, 0 where U is 0.
 * `rtol`: the tolerance to be recorded where a slope decided. Throws: never. NaN policy: as in JudgedBlock.
 */
export function probeBlock(probe: JudgedProbe, rtol: number): ProbeBlock {
  const { derivative, reference, uncertainty, floor, error, verdict } = probe;
  const resolution = uncertainty === 0 ? 0 : uncertainty / floor;
  const numbers = {
    rows: 1,
    columns: 1,
    outputValues: null,
    inputValues: null,
    derivative: Float64Array.of(derivative),
    references: [],
  };
  const judged = {
    best: {
      value: Float64Array.of(reference),
      uncertainty: Float64Array.of(uncertainty),
      largest: 0,
      source: Uint8Array.of(NO_SOURCE),
      step: new Uint8Array(1),
      conflict: new Uint8Array(1),
      sawNoChange: new Uint8Array(1),
      assumed: [],
      kinds: [],
      findings: [],
    },
    verdict: Uint8Array.of(VERDICT_CODE[verdict]),
    resolution: Float32Array.of(roundUp(resolution)),
    floor,
    // The floor is the probe's own: nothing of it comes from the project's tolerances.
    tolerances: { rtol: probe.tolerance ?? rtol, floorRel: 0, floorAbs: floor },
    counts: { ...NONE, [verdict]: 1 },
    worst: { row: 0, column: 0, error, derivative, reference, uncertainty },
  };
  return { numbers, judged };
}

const NONE: VerdictCounts = { entries: 1, agrees: 0, disagrees: 0, unresolved: 0, unreferenced: 0, invalid: 0 };
