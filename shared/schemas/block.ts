import { z } from "zod";
import { MAX_REFERENCES, MAX_SWEEP_STEPS } from "../domain/limits.ts";
import { MOTIONS, PROBE_KINDS, REFERENCE_METHODS, UNCERTAINTY_KINDS, VERDICTS } from "../domain/vocabulary.ts";
import { signature } from "./break.ts";
import { counts } from "./build.ts";
import { id, laneName, queryInteger, sha, timestamp, wireNumber } from "./common.ts";

export const worst = z
  .object({
    row: z.number().int(),
    column: z.number().int(),
    verdict: z.enum(VERDICTS),
    error: wireNumber.nullable(),
    derivative: wireNumber,
    reference: wireNumber.nullable(),
    uncertainty: wireNumber.nullable(),
  })
  .meta({ id: "WorstEntry" });

export const motionCounts = z
  .object({
    still: z.number().int(),
    together: z.number().int(),
    "derivative-only": z.number().int(),
    "model-only": z.number().int(),
    apart: z.number().int(),
  })
  .meta({ id: "MotionCounts" });

/** Entries that a build did not check and that keep an earlier verdict, and the age of the oldest in builds. */
export const carried = z.object({ entries: z.number().int(), oldest: z.number().int() }).meta({ id: "Carried" });

const side = z
  .object({
    name: z.string(),
    size: z.number().int(),
    unit: z.string().nullable(),
    elements: z.array(z.string()).nullable(),
  })
  .meta({ id: "BlockSide" });

/** What a probe came to. */
export const probeResult = z
  .object({
    blockId: id,
    kind: z.enum(PROBE_KINDS),
    label: z.string(),
    /** Of a directional derivative that of its worst element, as all that follows. */
    verdict: z.enum(VERDICTS),
    /** Relative; null where a number is not finite. */
    error: wireNumber.nullable(),
    /** Absolute, and relative to what the error is relative to. */
    uncertainty: wireNumber.nullable(),
    resolution: wireNumber.nullable(),
    /** On the error; null where the slope of the remainders decided. */
    tolerance: z.number().nullable(),
    /** True where a size that was not posted had to be assumed. */
    assumed: z.boolean(),
    /** Of the Taylor remainders against their steps, over the usable ones: 2 for a right gradient, 1 for a wrong one. */
    slope: z.number().nullable(),
    usableSteps: z.number().int().nullable(),
    steps: z.array(z.number()),
    remainders: z.array(wireNumber),
    /** A clause without a full stop. */
    sentence: z.string(),
  })
  .meta({ id: "ProbeResult" });
export type ProbeResult = z.infer<typeof probeResult>;
export type ProbeDetails = Omit<ProbeResult, "blockId">;

/** A block in the list of a build. */
export const blockRow = z
  .object({
    blockId: id,
    model: z.string(),
    point: z.string(),
    /** Null for a Jacobian; else the probe of it that this is, as "<kind>: <label>". */
    probe: z.string().nullable(),
    output: side,
    input: side,
    rows: z.number().int(),
    columns: z.number().int(),
    counts,
    carried: carried.nullable(),
    rtol: z.number(),
    floor: z.number(),
    /** Largest finite resolution over the entries: what the weakest reference could see. */
    resolution: wireNumber.nullable(),
    worst: worst.nullable(),
    signatures: z.array(signature),
    /** Null for the first build of its lane. */
    motion: motionCounts.nullable(),
  })
  .meta({ id: "BlockRow" });
export type BlockRow = z.infer<typeof blockRow>;

export const referenceSummary = z
  .object({
    index: z.number().int(),
    method: z.enum(REFERENCE_METHODS),
    uncertaintyKind: z.enum(UNCERTAINTY_KINDS),
    assumed: z.boolean(),
    stepKind: z.enum(["absolute", "relative"]),
    /** One per posted step, largest over the columns; empty where the method has none. */
    steps: z.array(z.number()),
    precision: z.number().nullable(),
    columns: z.array(z.number().int()).nullable(),
    cost: z.object({ evaluations: z.number().optional(), seconds: z.number().optional() }).nullable(),
  })
  .meta({ id: "ReferenceSummary" });

const plane = z.union([z.array(wireNumber.nullable()), z.string()]).meta({
  id: "Plane",
  description: "Row-major, rows x columns of the window; with format=f64le base64 of little-endian binary64.",
});
const codes = z.union([z.array(z.string().nullable()), z.string()]).meta({
  id: "CodePlane",
  description:
    "Words, row-major; with format=f64le base64 of one byte per entry, an index into the enumeration's order (255 = none).",
});

/** A block of a build with its numbers. Planes are the window's, row-major. */
export const blockDetail = blockRow
  .extend({
    buildId: id,
    commit: sha,
    lane: laneName,
    window: z.object({ rows: z.tuple([z.number(), z.number()]), columns: z.tuple([z.number(), z.number()]) }),
    format: z.enum(["json", "f64le"]),
    derivative: plane,
    reference: plane,
    uncertainty: plane,
    error: plane,
    verdict: codes,
    motionPlane: codes.nullable(),
    /** Index into `references` of the reference an entry was judged with (255 or null = none). */
    source: z.union([z.array(z.number().nullable()), z.string()]),
    /**
     * Builds since an entry was checked (255 or null = too long ago or never); null where this build checked whatever
     * has a verdict.
     */
    age: z.union([z.array(z.number().nullable()), z.string()]).nullable(),
    uncertaintyKind: z.enum(UNCERTAINTY_KINDS).nullable(),
    /** What the reference asked for by `posted` and `step` said; null or NaN where it said nothing. */
    posted: plane.optional(),
    outputValues: z.array(wireNumber).nullable(),
    inputValues: z.array(wireNumber).nullable(),
    derivativeMethod: z.string(),
    references: z.array(referenceSummary),
    /** Of this Jacobian, or where the block is itself a probe, of the one that it probes. */
    probes: z.array(probeResult),
    /** Where the block is a probe: the block of the Jacobian that it probes, if the build has one. */
    probeOf: id.nullable(),
    sources: z.array(z.string()),
  })
  .meta({ id: "Block" });
export type BlockDetail = z.infer<typeof blockDetail>;

const range = z.string().regex(/^\d{1,9}:\d{1,9}$/, "must be first:last-plus-one, like 0:100");
export const blockQuery = z.strictObject({
  format: z.enum(["json", "f64le"]).optional(),
  rows: range.optional(),
  columns: range.optional(),
  /** Index of a reference whose posted values are wanted beside the chosen ones, and of its step. */
  posted: queryInteger(0, MAX_REFERENCES - 1).optional(),
  step: queryInteger(0, MAX_SWEEP_STEPS - 1).optional(),
});

export const historyItem = z
  .object({
    commit: sha,
    buildId: id,
    subject: z.string().nullable(),
    author: z.string().nullable(),
    committedAt: timestamp.nullable(),
    derivative: wireNumber,
    reference: wireNumber.nullable(),
    uncertainty: wireNumber.nullable(),
    error: wireNumber.nullable(),
    verdict: z.enum(VERDICTS),
    /** Builds since the entry was checked: 0 in this one; null where its verdict is of no build. */
    age: z.number().int().nullable(),
    motion: z.enum(MOTIONS).nullable(),
    /**
     * Decades above the baseline and the CUSUM, with the baseline's centre and spread in decades; null beside the
     * default branch, and where the baseline is too young or the build tells nothing.
     */
    drift: z
      .object({
        decades: z.number(),
        cusum: z.number(),
        centre: z.number().nullable(),
        spread: z.number().nullable(),
      })
      .nullable(),
    event: z.enum(["break", "repair", "climb", "jump"]).nullable(),
  })
  .meta({ id: "HistoryItem" });
export type HistoryItem = z.infer<typeof historyItem>;
export const historyQuery = z.strictObject({
  lane: laneName.optional(),
  branch: z.string().max(250).optional(),
  limit: queryInteger(1, 5000).optional(),
});
