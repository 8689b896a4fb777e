import { ASSUMED_COMPLEX_STEP } from "../reference/absoluteSteps.ts";
import type { Estimates } from "../reference/estimator.ts";
import { SAW_NO_CHANGE } from "../reference/estimator.ts";
import { sweepSafety } from "../reference/fillSweep.ts";
import type { Geometry } from "../reference/geometry.ts";
import { entrySize } from "../reference/stepModel.ts";
import type { SweepPlan } from "../reference/sweepPlan.ts";
import type { SweepReader } from "../reference/sweepReader.ts";
import { UNIT_ROUNDOFF } from "../roundoff.ts";
import type { ColumnFacts } from "./bestStep.ts";
import { MODEL_GUARDS, stepCurve } from "./bestStep.ts";
import type { ColumnSetting } from "./columnCandidates.ts";
import { columnCandidates } from "./columnCandidates.ts";
import type { ColumnScratch } from "./columnScratch.ts";
import { clearScratch } from "./columnScratch.ts";
import { entryParts } from "./entryParts.ts";
import { gather, medianOf, pooled, relativeTo } from "./pool.ts";
import type { RowFacts } from "./rowFacts.ts";
import type { ColumnStudy, JudgedWith, Pooled, StepBranch, StepEstimate } from "./types.ts";

/** As exact as a method without steps is taken to be (`fillExact`). */
const EXACT = 64 * UNIT_ROUNDOFF;

/** One reference, read by columns. */
export interface StudiedReference {
  readonly setting: Pick<ColumnSetting, "method" | "scheme" | "precision">;
  readonly reader: SweepReader;
  readonly plan: SweepPlan;
  readonly sizes: Geometry;
  readonly rows: RowFacts;
  /** The judge's own estimates of all entries. */
  readonly estimates: Estimates;
  readonly judged: JudgedWith;
}

interface Tally {
  entries: number;
  quiet: number;
  living: number;
  resolved: number;
  truncated: number;
  cancelled: number;
}

/** The steps of covered column c, which is column `column` of the block. Cost: one pass and a sort of its entries. */
export function studyColumn(studied: StudiedReference, c: number, column: number, scratch: ColumnScratch): ColumnStudy {
  const { plan, sizes, judged } = studied;
  clearScratch(scratch);
  const count = plan.counts[c];
  for (let s = 0; s < count; s += 1) scratch.place[plan.posted[c * plan.stride + s]] = s;
  const tally: Tally = { entries: 0, quiet: 0, living: 0, resolved: 0, truncated: 0, cancelled: 0 };
  for (let row = 0; row < sizes.rows; row += 1) readEntry(studied, row, c, scratch, tally);
  const sweep = count > 1 && studied.setting.scheme.noisyValues > 0;
  const safety = sweepSafety(count);
  const setting: ColumnSetting = {
    ...studied.setting,
    guards: sweep ? { truncation: safety, rounding: safety } : MODEL_GUARDS,
    length: sizes.lengths[c],
    input: sizes.inputs[c],
    rtol: judged.rtol,
  };
  const facts = factsOf(scratch, tally.living);
  const { scheme, guards, precision, length, input } = setting;
  const { entries, quiet, resolved, truncated, cancelled } = tally;
  return {
    column,
    entries,
    quiet,
    steps: stepEstimates(plan, c, scratch, tally.living, setting),
    curve: tally.living === 0 ? null : stepCurve(scheme, facts, guards, precision, length, input),
    resolved,
    candidates: columnCandidates(setting, facts, scratch, tally.living, quiet),
    truncated,
    cancelled,
  };
}

function readEntry(studied: StudiedReference, row: number, c: number, scratch: ColumnScratch, tally: Tally): void {
  const { setting, reader, sizes, estimates, judged } = studied;
  const at = row * sizes.width + c;
  const u = estimates.uncertainty[at];
  if (!(u >= 0)) return;
  tally.entries += 1;
  const m = Math.abs(estimates.value[at]);
  const size = Math.max(m, judged.floor);
  if (estimates.unchanged[at] === SAW_NO_CHANGE && setting.scheme.noisyValues > 0) {
    tally.quiet += 1;
    tally.resolved += 1;
    return;
  }
  const resolved = relativeTo(size, u) <= judged.rtol;
  if (resolved) tally.resolved += 1;
  const length = sizes.lengths[c];
  const output = sizes.outputs[row];
  const ofRow = studied.rows.size[row];
  const n = reader.read(at, c);
  const { parts } = scratch;
  if (n === 0) parts.curvature = entrySize(m, output / length, ofRow / length);
  else {
    const noise = studied.rows.noise[row];
    const facts = { ...setting, length, input: sizes.inputs[c], output, size: ofRow, noise };
    const measured = entryParts(reader, n, facts, parts);
    const k = gatherSteps(reader, n, size, estimates.step[at], scratch);
    const large = setting.scheme.noisyValues > 0 || reader.steps[n - 1] > ASSUMED_COMPLEX_STEP * length;
    if (!resolved && large && parts.truncation[n - 1] > parts.rounding[n - 1]) tally.truncated += 1;
    const first = measured ? 1 : 0;
    if (!resolved && k === first && parts.rounding[k] >= parts.truncation[k]) tally.cancelled += 1;
  }
  const j = tally.living;
  scratch.curvature[j] = parts.curvature;
  scratch.complexCurvature[j] = entrySize(m, output / length, output / length);
  scratch.noise[j] = studied.rows.noise[row];
  scratch.magnitude[j] = m;
  scratch.size[j] = size;
  tally.living += 1;
}

/** Adds the entry's parts to the pools of its steps; returns which of the n is the chosen one. */
function gatherSteps(reader: SweepReader, n: number, size: number, step: number, scratch: ColumnScratch): number {
  const { parts, place } = scratch;
  let chosen = 0;
  for (let k = 0; k < n; k += 1) {
    const s = place[reader.posted[k]];
    gather(scratch.truncation[s], relativeTo(size, parts.truncation[k]));
    gather(scratch.rounding[s], relativeTo(size, parts.rounding[k]));
    gather(scratch.uncertainty[s], relativeTo(size, parts.truncation[k] + parts.rounding[k]));
    if (reader.posted[k] !== step) continue;
    chosen = k;
    scratch.chosen[s] += 1;
  }
  return chosen;
}

function factsOf(scratch: ColumnScratch, living: number): ColumnFacts {
  const median = (plane: Float64Array): number => {
    const { spare, size } = scratch;
    spare.count = 0;
    for (let k = 0; k < living; k += 1) gather(spare, relativeTo(size[k], plane[k]));
    return medianOf(spare);
  };
  return {
    curvature: median(scratch.curvature),
    complexCurvature: median(scratch.complexCurvature),
    noise: median(scratch.noise),
    magnitude: median(scratch.magnitude),
  };
}

function stepEstimates(
  plan: SweepPlan,
  c: number,
  scratch: ColumnScratch,
  living: number,
  { scheme, guards }: ColumnSetting,
): StepEstimate[] {
  if (living === 0) return [];
  const steps = Array.from({ length: plan.counts[c] }, (_, s) => ({
    step: plan.steps[c * plan.stride + s],
    posted: plan.posted[c * plan.stride + s],
    truncation: pooled(scratch.truncation[s]),
    rounding: pooled(scratch.rounding[s]),
    uncertainty: pooled(scratch.uncertainty[s]),
    chosen: scratch.chosen[s],
  }));
  const sweep = guards !== MODEL_GUARDS;
  return steps.map((step, s) => {
    const next = steps.at(s + 1);
    if (s > 0 || !sweep || next === undefined) return { ...step, branch: branchOf(step) };
    // The largest step's truncation is the next one's, scaled: it counts only where their difference is more than noise.
    const ratio = step.step / next.step;
    const change = next.truncation.median * ((scheme.order === 1 ? ratio : ratio * ratio) - 1);
    const branch = change > next.rounding.median ? branchOf(step) : branchOf({ ...step, truncation: NOTHING });
    return { ...step, branch };
  });
}

const NOTHING: Pooled = { median: 0, largest: 0 };

function branchOf(step: Pick<StepEstimate, "truncation" | "rounding" | "uncertainty">): StepBranch {
  if (step.uncertainty.median <= EXACT) return "floor";
  return step.truncation.median > step.rounding.median ? "truncation" : "rounding";
}
