import type { Algebra } from "../algebra/algebra.ts";

/** What a commit's code has, beyond what every commit's has: a change of a model, its derivative, or a mistake. */
export type Trait =
  | "blade-camber"
  | "blade-degrees"
  | "rotor-tip-loss"
  | "rotor-sign"
  | "drivetrain-friction"
  | "drivetrain-friction-partials"
  | "drivetrain-single"
  | "mooring-17-passes"
  | "mooring-15-passes"
  | "mooring-13-passes"
  | "mooring-12-passes"
  | "mooring-11-passes"
  | "mooring-9-passes"
  | "wake-meander"
  | "wake-rows"
  | "cost-drilling"
  | "cost-clip"
  | "cost-annuity-dropped";

export type Traits = ReadonlySet<Trait>;

export interface Side {
  readonly name: string;
  readonly unit?: string;
  readonly elements: readonly string[];
}

/** How a block's derivative comes about: written by hand, or forward AD whose rows `deliver` writes out. */
export type DerivativeSource =
  | { readonly method: "analytic"; partials(x: readonly number[], traits: Traits): number[][] }
  | { readonly method: "ad-forward"; deliver?(jacobian: number[][], traits: Traits): number[][] };

/** One reference of a block; several steps are a sweep. Steps are relative: times max(|x|, 1). */
export type ReferencePlan =
  | {
      readonly method: "central-difference" | "forward-difference";
      readonly steps: readonly number[];
      /** Input columns that it covers; missing = all. */
      readonly columns?: readonly number[];
    }
  | { readonly method: "complex-step"; readonly step: number };

/** One block of a model: a smooth function of named inputs, and how it is differentiated and checked. */
export interface BlockModel {
  readonly model: string;
  readonly output: Side;
  readonly input: Side;
  /** Input values by point, in the unit of the input. */
  readonly points: Readonly<Record<string, readonly number[]>>;
  readonly sources: readonly string[];
  /** The traits that change anything of this block. */
  readonly traits: readonly Trait[];
  /** How the derivative goes over the wire. */
  readonly wire: "rows" | "f64le" | "sparse";
  readonly derivative: DerivativeSource;
  readonly references: readonly ReferencePlan[];
  values<T>(algebra: Algebra<T>, x: readonly T[], traits: Traits): T[];
}
