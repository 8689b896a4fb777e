import type { Algebra } from "../algebra/algebra.ts";
import type { Code } from "../code.ts";

export interface Side {
  readonly name: string;
  readonly unit?: string;
  readonly elements: readonly string[];
}

/** One output vector of a model against one input vector, at the design point. */
export interface DemoModel {
  /** Dotted, as posted. */
  readonly model: string;
  readonly output: Side;
  readonly input: Side & { readonly values: readonly number[] };
  readonly sources: readonly string[];
  evaluate<T>(algebra: Algebra<T>, x: readonly T[], code: Code): T[];
  /** Written by hand, rows = output elements; null where the code base uses its AD pass. */
  readonly derivative: ((x: readonly number[], code: Code) => number[][]) | null;
}

export const SEA_WATER_DENSITY = 1025;
export const RADIANS_PER_DEGREE = Math.PI / 180;
