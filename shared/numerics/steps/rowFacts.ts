import { columnModel } from "../reference/columnModel.ts";
import type { Geometry } from "../reference/geometry.ts";
import { withoutInfinities } from "../reference/posted.ts";
import type { Scheme } from "../reference/scheme.ts";
import { surveyRow } from "../reference/surveyRow.ts";
import { surveyRows } from "../reference/surveyRows.ts";
import type { SweepPlan } from "../reference/sweepPlan.ts";
import type { SweepReader } from "../reference/sweepReader.ts";

/** What the judge knows of the output rows, in the unit of the output. */
export interface RowFacts {
  /** Size P of each row, as the judge takes it for this method. */
  readonly size: Float64Array;
  /** Noise N of a value of F: eta P, or what the sweep showed where that is more. */
  readonly noise: Float64Array;
}

/**
 * Sizes and noise of the rows, from the same surveys as the verdicts: a sweep of differences is pooled over its
 * columns (`surveyRow`), a single difference shows its sizes (`surveyRows`), a complex step is sized by |F| alone; its
 * noise, which only tells how differences would do, is eta times the size that its values show.
 *
 * Shapes: one number a row. NaN policy: values that are not finite are left out. Cost: one pass over the posted values.
 */
export function rowFacts(
  reader: SweepReader,
  scheme: Scheme,
  plan: SweepPlan,
  precision: number,
  sizes: Geometry,
): RowFacts {
  const single = reader.planes.length === 1 && scheme.noisyValues > 0;
  if (single) {
    const steps = plan.steps.map((step) => (step > 0 ? step : NaN));
    const model = columnModel(scheme, steps, precision, sizes);
    const size = surveyRows(withoutInfinities(reader.planes[0]), model, sizes).sizes;
    return { size, noise: size.map((p) => precision * p) };
  }
  const size = sizes.outputs.slice();
  const noise = new Float64Array(sizes.rows);
  const survey = { noise: 0, size: 0 };
  for (let row = 0; row < sizes.rows; row += 1) {
    surveyRow(reader, row, sizes, Math.max(1, scheme.noisyValues), survey);
    if (scheme.noisyValues > 0) size[row] = survey.size;
    noise[row] = scheme.noisyValues > 0 ? Math.max(precision * survey.size, survey.noise) : precision * survey.size;
  }
  return { size, noise };
}
