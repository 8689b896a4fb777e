import { DEFAULT_TOLERANCES } from "../../../../shared/domain/tolerances.ts";
import { isBadVerdict } from "../../../../shared/domain/vocabulary.ts";
import type { SignatureCode, SignatureScope } from "../../../../shared/domain/vocabulary.ts";
import { nameSignatures } from "../../../../shared/numerics/signatures/nameSignatures.ts";
import type { BlockNames, NamedSignature } from "../../../../shared/numerics/signatures/types.ts";
import type { BlockNumbers, JudgedBlock, ReferenceNumbers } from "../../../../shared/numerics/types.ts";
import { judgeBlock } from "../../../../shared/numerics/verdict/judgeBlock.ts";
import { mulberry32 } from "../../../support/random.ts";
import { PROBLEMS } from "../../problems/all.ts";
import { sparseProblems } from "./sparseProblems.ts";
import type { Problem } from "../../problems/problem.ts";
import { problemBlock } from "../blocks.ts";
import { reference } from "../references.ts";
import { KINDS } from "../trials.ts";
import { isAmbiguous } from "./ambiguous.ts";
import { PLANTERS } from "./plant.ts";
import type { Plant, Truth } from "./plant.ts";

export const NAMES: BlockNames = {
  output: { name: "f", unit: null, elements: null },
  input: { name: "x", unit: null, elements: null },
};

/** All kinds of reference: those of the trials, and a second code's derivative. */
const REFERENCES: Readonly<Record<string, (problem: Problem, x: readonly number[]) => ReferenceNumbers>> = {
  ...KINDS,
  "ad forward": (problem, x) =>
    reference("ad-forward", [{ step: null, values: Float64Array.from(problem.jacobian(x).flat()) }]),
  "high precision": (problem, x) =>
    reference("high-precision", [{ step: null, values: Float64Array.from(problem.jacobian(x).flat()) }]),
};

/** One mistake planted in one problem at one point, judged with one reference. */
export interface FaultTrial {
  readonly name: string;
  readonly sparse: boolean;
  readonly plant: Plant;
  readonly scope: SignatureScope;
  readonly named: readonly NamedSignature[];
  readonly outcome: "right" | "wrong" | "unnamed";
}
export interface CleanTrial {
  readonly name: string;
  readonly named: readonly NamedSignature[];
}

/** What a mistake that fits as well is told as beside the one that is named. */
const ALTERNATIVE: Partial<Record<SignatureCode, RegExp>> = {
  "rows-reordered": /^(The rows|Rows) /,
  "columns-reordered": /^(The columns|Columns) /,
};

interface Place {
  readonly name: string;
  readonly sparse: boolean;
  readonly truth: Truth;
  readonly block: BlockNumbers;
}

function places(seed: number): Place[] {
  const random = mulberry32(seed);
  const dense = PROBLEMS.map((problem) => ({ problem, sparse: false }));
  const sparse = sparseProblems().map((problem) => ({ problem, sparse: true }));
  return [...dense, ...sparse].flatMap(({ problem, sparse: isSparse }) =>
    problem.points.flatMap((x, point) =>
      Object.entries(REFERENCES).map(([kind, make]) => {
        const block = problemBlock(problem, x, [make(problem, x)]);
        const { rows, columns } = block;
        const name = `${problem.name} at point ${point}, ${kind}`;
        return { name, sparse: isSparse, block, truth: { rows, columns, values: block.derivative, random } };
      }),
    ),
  );
}

/** Every right Jacobian with every kind of reference. */
export function cleanTrials(): CleanTrial[] {
  return places(0).map(({ name, block }) => ({
    name,
    named: nameSignatures(block, judgeBlock(block, DEFAULT_TOLERANCES), NAMES),
  }));
}

/** Every kind of mistake in every `stride`-th of all places where it can be seen and told. */
export function faultTrials(seed: number, stride: number): FaultTrial[] {
  return places(seed)
    .filter((_, k) => k % stride === 0)
    .flatMap((place) => PLANTERS.flatMap((planter) => planted(place, planter(place.truth)) ?? []));
}

function planted({ name, sparse, truth, block }: Place, plant: Plant | null): FaultTrial | null {
  if (plant === null) return null;
  const faulty = { ...block, derivative: plant.derivative };
  const judged = judgeBlock(faulty, DEFAULT_TOLERANCES);
  const seen = Array.from(judged.verdict.keys()).filter((k) => isBadVerdict(judged.verdict[k] ?? 0));
  if (!canBeTold(truth, plant, judged, seen)) return null;
  const named = nameSignatures(faulty, judged, NAMES);
  const scope = scopeOf(truth, seen);
  return { name, sparse, plant, scope, named, outcome: outcomeOf(plant, scope, named) };
}

/** Nothing seen cannot be named, nor a fitted factor of one entry, nor what another mistake makes as well. */
function canBeTold(truth: Truth, plant: Plant, judged: JudgedBlock, seen: readonly number[]): boolean {
  const least =
    { factor: 2, rows: 2, columns: 2, transposed: 2, "storage order": 2, "uneven solve": 6 }[plant.kind] ?? 1;
  if (seen.length < least) return false;
  const size = (k: number) => Math.max(Math.abs(judged.best.value[k] ?? NaN), judged.floor);
  const slack = (k: number) => ((judged.resolution[k] ?? NaN) + judged.tolerances.rtol) * size(k);
  if (plant.kind === "product dropped" && seen.length < 0.9 * truth.values.length) return false;
  return plant.code === "not-finite" || !isAmbiguous(truth, plant, seen, slack);
}

function scopeOf({ rows, columns }: Truth, seen: readonly number[]): SignatureScope {
  if (seen.length === 1) return "entry";
  const rowsSeen = new Set(seen.map((k) => Math.floor(k / columns)));
  const columnsSeen = new Set(seen.map((k) => k % columns));
  if (rowsSeen.size === 1 && rows > 1) return "row";
  return columnsSeen.size === 1 && columns > 1 ? "column" : "block";
}

function outcomeOf(plant: Plant, scope: SignatureScope, named: readonly NamedSignature[]): FaultTrial["outcome"] {
  if (named.length === 0) return plant.code === null ? "right" : "unnamed";
  const [first] = named;
  if (named.length !== 1 || first?.scope !== scope) return "wrong";
  if (first.code === plant.code) return plant.says.test(first.detail) ? "right" : "wrong";
  const told = plant.code === null ? undefined : ALTERNATIVE[plant.code];
  return told !== undefined && first.alternatives.some((text) => told.test(text)) ? "right" : "wrong";
}
