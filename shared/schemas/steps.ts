import { z } from "zod";
import { MAX_REFERENCES } from "../domain/limits.ts";
import { REFERENCE_METHODS } from "../domain/vocabulary.ts";
import { STEP_BRANCHES } from "../numerics/steps/types.ts";
import { queryInteger, wireNumber } from "./common.ts";

/** Columns that one answer studies; more need another window. */
export const MAX_STUDIED_COLUMNS = 200;

const pooled = z.object({ median: wireNumber, largest: wireNumber }).meta({
  id: "PooledUncertainty",
  description: "Relative to max(|r|, floor), over the rows of the column.",
});
const method = z.enum(REFERENCE_METHODS);

export const stepEstimate = z
  .object({
    /** Absolute, in the unit of the input. */
    step: z.number(),
    posted: z.number().int(),
    branch: z.enum(STEP_BRANCHES),
    truncation: pooled,
    rounding: pooled,
    uncertainty: pooled,
    /** Entries that the judge took from this step. */
    chosen: z.number().int(),
  })
  .meta({ id: "StepEstimate" });

export const columnStudy = z
  .object({
    column: z.number().int(),
    entries: z.number().int(),
    /** Entries whose differences are exactly 0 at every step: decided whatever the step. */
    quiet: z.number().int(),
    /** Largest step first. */
    steps: z.array(stepEstimate),
    /** Modelled branches: uncertainty(h) = truncation h^order + rounding / h + floor. */
    curve: z
      .object({ order: z.number().int(), truncation: wireNumber, rounding: wireNumber, floor: wireNumber })
      .nullable(),
    /** Entries resolved at rtol by the reference as posted. */
    resolved: z.number().int(),
    /** The reference's own method first. */
    candidates: z.array(
      z.object({
        method,
        /** The best step; of a complex step the largest of the equally good ones. */
        step: z.number().nullable(),
        resolution: pooled.nullable(),
        resolved: z.number().int(),
      }),
    ),
    truncated: z.number().int(),
    cancelled: z.number().int(),
  })
  .meta({ id: "ColumnStudy" });
export type ColumnStudyRow = z.infer<typeof columnStudy>;

/** The study of one reference: what its steps could see, and what would see more. */
export const stepStudy = z
  .object({
    reference: z.number().int(),
    method,
    /** Noise and curvature come from a sweep; else from the model. */
    measured: z.boolean(),
    stated: z.boolean(),
    rtol: z.number(),
    floor: z.number(),
    /** Columns of the block that were looked at, first and last plus one, and how many the block has. */
    window: z.tuple([z.number().int(), z.number().int()]),
    blockColumns: z.number().int(),
    /** Over the columns of the window. */
    totals: z.object({
      entries: z.number().int(),
      resolved: z.number().int(),
      candidates: z.array(z.object({ method, step: z.number().nullable(), resolved: z.number().int() })),
    }),
    advice: z.array(z.string()),
    columns: z.array(columnStudy),
  })
  .meta({ id: "StepStudy", description: "The steps of one reference of a block." });
export type StepStudyAnswer = z.infer<typeof stepStudy>;

export const stepStudyQuery = z.strictObject({
  /** Index of the reference, 0 if left out. */
  reference: queryInteger(0, MAX_REFERENCES - 1).optional(),
  /** One column. */
  column: queryInteger(0, 999_999_999).optional(),
  /** A window of them; the first 200 if neither is given. */
  columns: z
    .string()
    .regex(/^\d{1,9}:\d{1,9}$/, "must be first:last-plus-one, like 0:100")
    .optional(),
});
