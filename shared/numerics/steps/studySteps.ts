import { newEstimates } from "../reference/estimator.ts";
import type { Geometry } from "../reference/geometry.ts";
import { geometry } from "../reference/geometry.ts";
import { precisionOf, prepareReference } from "../reference/prepareReference.ts";
import { schemeOf } from "../reference/scheme.ts";
import { sweepPlan } from "../reference/sweepPlan.ts";
import { sweepReader } from "../reference/sweepReader.ts";
import type { BlockNumbers } from "../types.ts";
import { newColumnScratch } from "./columnScratch.ts";
import { rowFacts } from "./rowFacts.ts";
import type { StudiedReference } from "./studyColumn.ts";
import { studyColumn } from "./studyColumn.ts";
import type { ColumnStudy, JudgedWith, StepStudy } from "./types.ts";

/**
 * The steps of one reference of a block: how far each may be from the truth and why, which one is best, and what other
 * methods would give at their best.
 *
 * Formula: per entry and step the two parts of the judge's uncertainty (`leastSweepError`, `stepModel`; safety factors
 * included), relative to max(|r|, floor) with r the reference's own estimate; per column the median and the largest
 * over the rows. The noise N is the row's (`surveyRow`), the curvature S what the sweep's truncation says; a single step
 * has both from the model. The best step minimises the sum of the medians (`bestStep`); the methods not posted are told
 * from the same N and S: a guess as good as the assumption that second and third derivatives are of one size on the
 * scale of L.
 *
 * Shapes: as `bestReference`; `columns` first <= c < last of the block. Units: steps in those of the input, all else
 * dimensionless. Domain: any numbers; judged.rtol, judged.floor >= 0.
 * Throws: RangeError naming the argument that is wrong.
 * NaN policy: a value that is not finite is no estimate; finite input never gives NaN, overflow gives +Infinity.
 * Accuracy: at the step that the judge chose, the uncertainty of an entry is the judge's own to a rounding.
 * Cost: three visits of each posted value and a sort of each column of the window.
 * Source: the parts name their own; J. J. More, S. M. Wild, SIAM J. Sci. Comput. 33(3):1292-1314, 2011 (noise first, then
 * the step).
 */
export function studySteps(
  block: Omit<BlockNumbers, "derivative">,
  reference: number,
  judged: JudgedWith,
  columns: readonly [number, number] = [0, block.columns],
): StepStudy {
  const posted = block.references.at(reference);
  if (reference < 0 || posted === undefined) {
    throw new RangeError(`reference: ${reference}, expected less than ${block.references.length}`);
  }
  const name = `references[${reference}]`;
  const tolerances = { rtol: judged.rtol, floorRel: 0, floorAbs: judged.floor };
  const estimator = prepareReference(block, posted, tolerances, name);
  const sizes = geometry(block, posted, name);
  const estimates = newEstimates(block.rows * sizes.width);
  estimator.fill(0, block.rows, estimates);
  const scheme = schemeOf(posted.method);
  const study = {
    method: posted.method,
    measured: scheme !== null && scheme.noisyValues > 0 && posted.steps.length > 1,
    stated: posted.uncertainty !== null,
    rtol: judged.rtol,
  };
  const covered = coveredIn(sizes, posted.columns, columns);
  if (scheme === null) {
    const { value, uncertainty } = estimates;
    return {
      ...study,
      columns: covered.map(([c, column]) => withoutSteps(value, uncertainty, sizes, c, column, judged)),
    };
  }
  const plan = sweepPlan(posted, scheme, sizes);
  const reader = sweepReader(posted.steps, plan);
  const precision = precisionOf(posted);
  const studied: StudiedReference = {
    setting: { method: posted.method, scheme, precision },
    reader,
    plan,
    sizes,
    rows: rowFacts(reader, scheme, plan, precision, sizes),
    estimates,
    judged,
  };
  const scratch = newColumnScratch(block.rows, posted.steps.length);
  return { ...study, columns: covered.map(([c, column]) => studyColumn(studied, c, column, scratch)) };
}

/** Covered columns within the window, as pairs of their place in the reference and their column of the block. */
function coveredIn(
  { width }: Geometry,
  columns: Int32Array | null,
  [first, last]: readonly [number, number],
): (readonly [number, number])[] {
  const pairs = Array.from({ length: width }, (_, c) => [c, columns === null ? c : columns[c]] as const);
  return pairs.filter(([, column]) => column >= first && column < last).sort((a, b) => a[1] - b[1]);
}

/** A column of a method without steps: only what it resolves. */
function withoutSteps(
  value: Float64Array,
  uncertainty: Float64Array,
  { rows, width }: Geometry,
  c: number,
  column: number,
  { rtol, floor }: JudgedWith,
): ColumnStudy {
  let entries = 0;
  let resolved = 0;
  for (let at = c; at < rows * width; at += width) {
    if (!(uncertainty[at] >= 0)) continue;
    entries += 1;
    if (uncertainty[at] <= rtol * Math.max(Math.abs(value[at]), floor)) resolved += 1;
  }
  return { column, entries, quiet: 0, steps: [], curve: null, resolved, candidates: [], truncated: 0, cancelled: 0 };
}
