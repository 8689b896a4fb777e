import type { BlockNumbers, ReferenceNumbers, ReferenceStep } from "../../shared/numerics/types.ts";
import { checkProbes } from "./checkProbes.ts";
import type { Complaints, Path } from "./complaints.ts";
import { decodeMatrix } from "./decodeMatrix.ts";
import type { Shape } from "./decodeMatrix.ts";
import { decodeVector } from "./decodeVector.ts";
import { readNumber } from "./readNumber.ts";
import { isProbedOnly } from "./skeleton.ts";
import type { SkeletonBlock } from "./skeleton.ts";

type SkeletonReference = SkeletonBlock["references"][number];

export interface DecodedBlock {
  /** Null where only probes were posted. */
  readonly numbers: BlockNumbers | null;
  readonly outputValues: Float64Array | null;
}

/** Reads the numbers of one block; what is wrong goes to `complaints`, and the result is then of no use. */
export function decodeBlock(block: SkeletonBlock, path: Path, complaints: Complaints): DecodedBlock {
  const shape = { rows: block.output.size, columns: block.input.size };
  checkNames(block, path, complaints);
  checkProbes(block.probes, path, complaints);
  const outputValues = sideValues(block.output, {}, [...path, "output"], complaints);
  const inputValues = sideValues(block.input, { finite: true }, [...path, "input"], complaints);
  if (isProbedOnly(block)) return { numbers: null, outputValues };
  const derivative = derivativeOf(block, shape, [...path, "derivative", "values"], complaints);
  const references = block.references.map((reference, k) =>
    decodeReference(reference, shape, [...path, "references", k], complaints),
  );
  return { numbers: { ...shape, outputValues, inputValues, derivative, references }, outputValues };
}

function derivativeOf(block: SkeletonBlock, shape: Shape, path: Path, complaints: Complaints): Float64Array {
  const { values } = block.derivative;
  if (values !== undefined) return decodeMatrix(values, shape, {}, path, complaints).values;
  complaints.add(path, "is missing: only a block with probes and without references may leave it out");
  return new Float64Array(0);
}

function sideValues(
  side: SkeletonBlock["output"],
  rule: { finite?: boolean },
  path: Path,
  complaints: Complaints,
): Float64Array | null {
  if (side.values === undefined) return null;
  return decodeVector(side.values, side.size, rule, [...path, "values"], complaints);
}

function checkNames(block: SkeletonBlock, path: Path, complaints: Complaints): void {
  for (const side of ["output", "input"] as const) {
    const { elements, size } = block[side];
    if (elements !== undefined && elements.length !== size) {
      complaints.add([...path, side, "elements"], `has ${elements.length} names, expected ${size}`);
    }
  }
}

function decodeReference(
  reference: SkeletonReference,
  block: Shape,
  path: Path,
  complaints: Complaints,
): ReferenceNumbers {
  const columns = coveredColumns(reference, block.columns, path, complaints);
  // Columns that are wrong say nothing of the shape, and must not make memory be taken for it.
  const posted = columns === "wrong" ? [] : postedSteps(reference, path, complaints);
  const shape = { rows: block.rows, columns: columns === null ? block.columns : columns.length };
  let notFinite = 0;
  const readStep = (values: unknown, step: unknown, at: Path): ReferenceStep => {
    const matrix = decodeMatrix(values, shape, { null: NaN }, [...at, "values"], complaints);
    notFinite += matrix.notFinite;
    maskNotFinite(matrix.values, matrix.notFinite);
    return { values: matrix.values, step: decodeStep(step, shape.columns, [...at, "step"], complaints) };
  };
  const steps = posted.map(({ values, step, at }) => readStep(values, step, at));
  return {
    method: reference.method,
    stepKind: reference.stepKind ?? "absolute",
    precision: reference.precision ?? null,
    columns: columns === "wrong" ? null : columns,
    steps,
    uncertainty: columns === "wrong" ? null : decodeUncertainty(reference.uncertainty, shape, path, complaints),
    notFinite,
  };
}

/** A reference that is not finite is no reference: the judge reads NaN as "not computed". */
function maskNotFinite(values: Float64Array, count: number): void {
  if (count === 0) return;
  for (let at = 0; at < values.length; at++) if (!Number.isFinite(values[at])) values[at] = NaN;
}

function coveredColumns(
  reference: SkeletonReference,
  size: number,
  path: Path,
  complaints: Complaints,
): Int32Array | "wrong" | null {
  if (reference.columns === undefined) return null;
  const seen = new Set<number>();
  let wrong = false;
  reference.columns.forEach((column, k) => {
    const detail =
      column >= size
        ? `must be below ${size}, the size of the input`
        : seen.has(column)
          ? `column ${column} is given twice`
          : null;
    if (detail !== null) complaints.add([...path, "columns", k], detail);
    wrong ||= detail !== null;
    seen.add(column);
  });
  return wrong ? "wrong" : Int32Array.from(reference.columns);
}

/** A reference has `values` (with or without a step) or a `sweep`, never both. */
function postedSteps(
  reference: SkeletonReference,
  path: Path,
  complaints: Complaints,
): { values: unknown; step: unknown; at: Path }[] {
  const { sweep, values, step } = reference;
  if ((sweep === undefined) === (values === undefined)) {
    complaints.add(path, "needs either values or a sweep");
    return [];
  }
  if (sweep === undefined) return [{ values, step, at: path }];
  if (step !== undefined) complaints.add([...path, "step"], "belongs to the steps of the sweep");
  return sweep.map((one, k) => ({ values: one.values, step: one.step, at: [...path, "sweep", k] }));
}

function decodeStep(
  posted: unknown,
  columns: number,
  path: Path,
  complaints: Complaints,
): number | Float64Array | null {
  if (posted === undefined) return null;
  if (typeof posted === "number") {
    if (!(posted > 0 && Number.isFinite(posted))) complaints.add(path, "must be positive and finite");
    return posted;
  }
  if (!Array.isArray(posted)) {
    complaints.add(path, "must be a number, or one for each covered column");
    return null;
  }
  const steps = decodeVector(posted, columns, { finite: true }, path, complaints);
  if (posted.length === columns && steps.some((step) => !(step > 0))) complaints.add(path, "must be positive");
  return steps;
}

function decodeUncertainty(
  posted: unknown,
  shape: Shape,
  path: Path,
  complaints: Complaints,
): number | Float64Array | null {
  if (posted === undefined) return null;
  const rule = { null: Infinity, notNegative: true };
  if (typeof posted === "number") {
    const { value, wrong } = readNumber(posted, rule);
    if (wrong !== null) complaints.add([...path, "uncertainty"], wrong);
    return value;
  }
  return decodeMatrix(posted, shape, rule, [...path, "uncertainty"], complaints).values;
}
