import type { Tolerances } from "../../domain/tolerances.ts";
import type { ReferenceMethod } from "../../domain/vocabulary.ts";
import type { BlockNumbers, JudgedBlock } from "../types.ts";
import { judgeBlock } from "../verdict/judgeBlock.ts";

/** Derivative and reference of an output vector along one direction. */
export interface DirectionalProbe {
  readonly method: ReferenceMethod;
  /** Absolute, along the direction; null for methods without one. */
  readonly step: number | null;
  /** One for each output element. */
  readonly derivative: readonly number[];
  readonly reference: readonly number[];
}

/**
 * A directional derivative judged as a block of one column (sections 1 and 2 of the judging rules).
 *
 * Formula: `judgeBlock` with J d as the derivative, the posted estimate as its one reference at the posted step.
 * Shapes: m numbers of each; `outputValues` (F) is used where it has m numbers, else |F| is assumed. Units: those of J d.
 * Domain: as judgeBlock; the direction's length counts as the input's characteristic length 1.
 * Throws: RangeError naming the argument whose length is wrong.
 * NaN policy: as judgeBlock; a reference that is not finite is no reference.
 * Source: section 7 of the judging rules.
 */
export function judgeDirectional(
  probe: DirectionalProbe,
  outputValues: Float64Array | null,
  tolerances: Tolerances,
): { readonly numbers: BlockNumbers; readonly judged: JudgedBlock } {
  const rows = probe.derivative.length;
  if (probe.reference.length !== rows) {
    throw new RangeError(`reference: ${probe.reference.length} numbers, expected ${rows}`);
  }
  const values = Float64Array.from(probe.reference, (value) => (Number.isFinite(value) ? value : NaN));
  const numbers: BlockNumbers = {
    rows,
    columns: 1,
    outputValues: outputValues?.length === rows ? outputValues : null,
    inputValues: null,
    derivative: Float64Array.from(probe.derivative),
    references: [
      {
        method: probe.method,
        stepKind: "absolute",
        precision: null,
        columns: null,
        steps: [{ step: probe.step, values }],
        uncertainty: null,
        notFinite: values.reduce((count, value) => count + Number(Number.isNaN(value)), 0),
      },
    ],
  };
  return { numbers, judged: judgeBlock(numbers, tolerances) };
}
