import type { BuildDocument } from "../../shared/schemas/build.ts";
import type { Code } from "./code.ts";
import { byCentralDifferences, byComplexSteps, byDualNumbers, byForwardDifferences, outputs } from "./jacobians.ts";
import type { Rows } from "./jacobians.ts";
import { MODELS } from "./models/index.ts";
import type { DemoModel } from "./models/model.ts";
import { probesOf } from "./probes.ts";
import { remember } from "./remember.ts";

export const LANES = ["gcc-release", "clang-arm"] as const;
export type LaneName = (typeof LANES)[number];

export type WireBlock = BuildDocument["blocks"][number];
type WireReference = NonNullable<WireBlock["references"]>[number];

/** What a lane's check job can afford for a block. */
type Plan =
  { readonly kind: "central" | "forward"; readonly relativeSteps: readonly number[] } | { readonly kind: "complex" };
interface BlockPlan {
  readonly lanes: Readonly<Partial<Record<LaneName, readonly Plan[]>>>;
}

const sweep = (...relativeSteps: number[]): Plan => ({ kind: "central", relativeSteps });
const forward = (step: number): Plan => ({ kind: "forward", relativeSteps: [step] });
const complexStep: Plan = { kind: "complex" };
const COMPLEX_STEP = 1e-20;
const FINE = [1e-2, 1e-3, 1e-4, 1e-5] as const;

/** By model and output. The second lane runs on a small machine: it leaves out the wake and saves on sweeps. */
const PLANS: Readonly<Record<string, BlockPlan>> = {
  "blade.section lift": {
    lanes: { "gcc-release": [sweep(1e-1, ...FINE)], "clang-arm": [sweep(1e-3, 1e-4, 1e-5)] },
  },
  "rotor.thrust thrust": { lanes: { "gcc-release": [complexStep], "clang-arm": [complexStep] } },
  "rotor.thrust power": { lanes: { "gcc-release": [sweep(...FINE)], "clang-arm": [forward(1e-7)] } },
  "drivetrain.torque torque": { lanes: { "gcc-release": [sweep(...FINE)], "clang-arm": [sweep(1e-3, 1e-4, 1e-5)] } },
  "mooring.tension tension": { lanes: { "gcc-release": [complexStep], "clang-arm": [complexStep] } },
  "wake.deficit deficit": { lanes: { "gcc-release": [sweep(1e-2, 1e-3, 1e-4, 1e-5)] } },
  "cost.energy cost": { lanes: { "gcc-release": [complexStep, sweep(1e-2, 1e-3, 1e-4)], "clang-arm": [complexStep] } },
  "cost.energy energy": { lanes: { "gcc-release": [sweep(1e-4)], "clang-arm": [forward(1e-7)] } },
};

/** Models whose check job draws probes as well. */
const PROBED: ReadonlySet<string> = new Set(["blade.section"]);

/** Larger blocks travel as base64, as a job with many entries would send them. */
const ROWS_UP_TO = 200;

function matrix(rows: Rows): Rows | { f64le: string } {
  const flat = Float64Array.from(rows.flat());
  return flat.length <= ROWS_UP_TO ? rows : { f64le: Buffer.from(flat.buffer).toString("base64") };
}

/** A step in the unit of each input: its size, or 1 where it is small, times the relative step. */
const stepsOf = (model: DemoModel, relative: number): number[] =>
  model.input.values.map((value) => relative * Math.max(Math.abs(value), 0.1));

function reference(model: DemoModel, code: Code, plan: Plan): WireReference {
  const inputs = model.input.values.length;
  if (plan.kind === "complex") {
    const values = matrix(byComplexSteps(model, code, COMPLEX_STEP));
    return { method: "complex-step", step: COMPLEX_STEP, values, cost: { evaluations: inputs } };
  }
  const central = plan.kind === "central";
  const difference = central ? byCentralDifferences : byForwardDifferences;
  const method = central ? "central-difference" : "forward-difference";
  const taken = plan.relativeSteps.map((relative) => {
    const step = stepsOf(model, relative);
    return { step, values: matrix(difference(model, code, step)) };
  });
  const evaluations = plan.relativeSteps.length * inputs * (central ? 2 : 1);
  const one = taken.length === 1 ? taken[0]! : null;
  return one ? { method, ...one, cost: { evaluations } } : { method, sweep: taken, cost: { evaluations } };
}

/**
 * Every block that a lane's check job makes of a code base, evaluated for real. Most commits leave most models alone:
 * a block is worked out again only where something that it reads has changed.
 */
export function blocksOf(code: Code, lane: LaneName): WireBlock[] {
  return JOBS[lane].map((job) => job(code));
}

const jobsOf = (lane: LaneName) =>
  MODELS.flatMap((model: DemoModel) => {
    const plans = PLANS[`${model.model} ${model.output.name}`]!.lanes[lane];
    return plans === undefined ? [] : [remember((code: Code) => blockOf(model, code, plans))];
  });
const JOBS = { "gcc-release": jobsOf("gcc-release"), "clang-arm": jobsOf("clang-arm") };

function blockOf(model: DemoModel, code: Code, plans: readonly Plan[]): WireBlock {
  const { output, input } = model;
  const byHand = model.derivative?.(input.values, code);
  const delivered = byHand ?? byDualNumbers(model, code);
  return {
    model: model.model,
    output: {
      name: output.name,
      size: output.elements.length,
      ...(output.unit === undefined ? {} : { unit: output.unit }),
      values: outputs(model, code),
      elements: [...output.elements],
    },
    input: {
      name: input.name,
      size: input.values.length,
      ...(input.unit === undefined ? {} : { unit: input.unit }),
      values: [...input.values],
      elements: [...input.elements],
    },
    derivative: {
      method: byHand ? "analytic" : "ad-forward",
      values: matrix(delivered),
      cost: { evaluations: 1 },
    },
    references: plans.map((plan) => reference(model, code, plan)),
    ...(PROBED.has(model.model) ? { probes: probesOf(model, code, delivered) } : {}),
    sources: [...model.sources],
  };
}
