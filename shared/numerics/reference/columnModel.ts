import type { Geometry } from "./geometry.ts";
import type { Scheme } from "./scheme.ts";
import { noiseFactor, roundingFactor, truncationFactor } from "./stepModel.ts";

/** Factors of the modelled uncertainty per covered column. */
export interface ColumnModel {
  readonly truncation: Float64Array;
  readonly noise: Float64Array;
  readonly rounding: Float64Array;
  /** 1/L. */
  readonly perLength: Float64Array;
  /** 0, or +Infinity where the step is not known or sees nothing. */
  readonly unusable: Float64Array;
}

/** Works out the factors of a single step for all covered columns; `steps` as from `absoluteSteps`. */
export function columnModel(scheme: Scheme, steps: Float64Array, precision: number, sizes: Geometry): ColumnModel {
  const { width, lengths, inputs } = sizes;
  const truncation = new Float64Array(width);
  const noise = new Float64Array(width);
  const rounding = new Float64Array(width);
  const unusable = new Float64Array(width);
  for (let c = 0; c < width; c += 1) {
    const h = steps[c];
    if (h > 0) {
      truncation[c] = truncationFactor(scheme, h, lengths[c]);
      noise[c] = noiseFactor(scheme, h, precision);
      rounding[c] = roundingFactor(scheme, h, inputs[c]);
    } else unusable[c] = Infinity;
  }
  return { truncation, noise, rounding, unusable, perLength: lengths.map((length) => 1 / length) };
}
