import type { ReferenceStep } from "../types.ts";
import type { SweepPlan } from "./sweepPlan.ts";

/** Reads the steps of one entry at a time into fixed scratch arrays, largest step first. */
export interface SweepReader {
  readonly planes: readonly Float64Array[];
  /** D_1 ... D_n of the entry read last. */
  readonly values: Float64Array;
  /** h_1 > ... > h_n. */
  readonly steps: Float64Array;
  /** Their indices as posted. */
  readonly posted: Uint8Array;
  /** Reads entry `at` of the planes, in covered column `c`; returns n, the usable steps with a finite value. */
  readonly read: (at: number, c: number) => number;
}

/** A reader over the planes of a sweep. Allocates once; reading does not. */
export function sweepReader(sweep: readonly ReferenceStep[], plan: SweepPlan): SweepReader {
  const { stride } = plan;
  const planes = sweep.map((step) => step.values);
  const values = new Float64Array(stride);
  const steps = new Float64Array(stride);
  const posted = new Uint8Array(stride);
  const read = (at: number, c: number): number => {
    const start = c * stride;
    const end = start + plan.counts[c];
    let n = 0;
    for (let s = start; s < end; s += 1) {
      const k = plan.posted[s];
      const d = (planes[k] as Float64Array)[at];
      if (d - d !== 0) continue;
      values[n] = d;
      steps[n] = plan.steps[s];
      posted[n] = k;
      n += 1;
    }
    return n;
  };
  return { planes, values, steps, posted, read };
}
