import type { BuildDocument } from "../../../shared/schemas/build.ts";
import type { ReferencePlan } from "../models/types.ts";
import { jacobianByComplexStep, jacobianByDifferences, jacobianByDuals, outputsOf } from "./jacobians.ts";
import type { Code, Matrix } from "./jacobians.ts";

type BlockDocument = BuildDocument["blocks"][number];
type ReferenceDocument = NonNullable<BlockDocument["references"]>[number];
type MatrixDocument = BlockDocument["derivative"]["values"];

/** Evaluates and differentiates one block at one point, and checks it as its plan says: a block as it is posted. */
export function makeBlock(code: Code, point: string): BlockDocument {
  const { block } = code;
  const x = block.points[point] as readonly number[];
  const pack = packers[block.wire];
  return {
    model: block.model,
    point,
    output: {
      name: block.output.name,
      size: block.output.elements.length,
      unit: block.output.unit,
      values: outputsOf(code, x),
      elements: [...block.output.elements],
    },
    input: {
      name: block.input.name,
      size: x.length,
      unit: block.input.unit,
      values: [...x],
      elements: [...block.input.elements],
    },
    derivative: { method: block.derivative.method, values: pack(derivativeOf(code, x)), cost: derivativeCost(code, x) },
    references: block.references.map((plan) => makeReference(code, x, plan, pack)),
    sources: [...block.sources],
  };
}

/** What the code under test delivers. */
export function derivativeOf(code: Code, x: readonly number[]): Matrix {
  const { derivative } = code.block;
  if (derivative.method === "analytic") return derivative.partials(x, code.traits);
  const jacobian = jacobianByDuals(code, x);
  return derivative.deliver?.(jacobian, code.traits) ?? jacobian;
}

function derivativeCost({ block }: Code, x: readonly number[]): { evaluations: number } {
  return { evaluations: block.derivative.method === "analytic" ? 1 : x.length };
}

function makeReference(
  code: Code,
  x: readonly number[],
  plan: ReferencePlan,
  pack: (matrix: Matrix) => MatrixDocument,
): ReferenceDocument {
  if (plan.method === "complex-step") {
    const values = pack(jacobianByComplexStep(code, x, plan.step));
    return { method: plan.method, step: plan.step, values, cost: { evaluations: x.length } };
  }
  const { method, steps, columns } = plan;
  const sweep = steps.map((step) => ({
    step,
    values: pack(jacobianByDifferences(code, x, { scheme: method, step, columns })),
  }));
  const runs = (columns?.length ?? x.length) * steps.length;
  const cost = { evaluations: method === "central-difference" ? 2 * runs : runs + 1 };
  const covered = columns === undefined ? {} : { columns: [...columns] };
  const common = { method, stepKind: "relative", ...covered, cost } as const;
  const [only] = sweep;
  return sweep.length === 1 && only ? { ...common, ...only } : { ...common, sweep };
}

const packers: Record<Code["block"]["wire"], (matrix: Matrix) => MatrixDocument> = {
  rows: (matrix) => matrix,
  f64le: (matrix) => ({ f64le: toBase64(matrix.flat()) }),
  sparse: (matrix) => {
    const entries = matrix.flatMap((row, r) => row.flatMap((value, c) => (value === 0 ? [] : [{ r, c, value }])));
    return {
      rows: entries.map((entry) => entry.r),
      columns: entries.map((entry) => entry.c),
      values: entries.map((entry) => entry.value),
    };
  },
};

/** Little-endian binary64, whatever the machine. */
function toBase64(numbers: readonly number[]): string {
  const bytes = Buffer.alloc(8 * numbers.length);
  numbers.forEach((value, at) => bytes.writeDoubleLE(value, 8 * at));
  return bytes.toString("base64");
}
