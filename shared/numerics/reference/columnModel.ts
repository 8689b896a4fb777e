import type { Geometry } from "./geometry.ts";
import type { Scheme } from "./scheme.ts";
import { noiseFactor, roundingFactor, truncationFactor } from "./stepModel.ts";

/** Factors of the modelled uncertainty per covered column; noise is +Infinity where the step is of no use. */
export interface ColumnModel {
  readonly truncation: Float64Array;
  readonly noise: Float64Array;
  readonly rounding: Float64Array;
  /** 1/L. */
  readonly perLength: Float64Array;
}

/** Works out the factors of a single step for all covered columns; `steps` as from `absoluteSteps`. */
export function columnModel(scheme: Scheme, steps: Float64Array, precision: number, sizes: Geometry): ColumnModel {
  const { width, lengths, inputs } = sizes;
  const truncation = new Float64Array(width);
  const noise = new Float64Array(width);
  const rounding = new Float64Array(width);
  for (let c = 0; c < width; c += 1) {
    const h = steps[c];
    if (h > 0) {
      truncation[c] = truncationFactor(scheme, h, precision, lengths[c]);
      noise[c] = noiseFactor(scheme, h, precision);
      rounding[c] = roundingFactor(scheme, h, inputs[c]);
    } else noise[c] = Infinity;
  }
  return { truncation, noise, rounding, perLength: lengths.map((length) => 1 / length) };
}
