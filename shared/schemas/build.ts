import { z } from "zod";
import { MAX_PROBES, MAX_REFERENCES, MAX_SWEEP_STEPS } from "../domain/limits.ts";
import {
  BUILD_STATES,
  DEFAULT_LANE,
  DEFAULT_POINT,
  DERIVATIVE_METHODS,
  REFERENCE_METHODS,
  STEP_KINDS,
} from "../domain/vocabulary.ts";
import { commit } from "./commit.ts";
import { id, laneName, sha, timestamp, wireNumber } from "./common.ts";
import { breakBrief } from "./break.ts";
import { gate } from "./gate.ts";

const name = z.string().trim().min(1).max(200);
const modelName = z
  .string()
  .regex(/^[^\s.]+(\.[^\s.]+)*$/u, "must be dotted words without spaces, like rotor.thrust")
  .max(200);
/** Of a block that is probed only any size goes; where its numbers are posted they are counted against the limits. */
const size = z.number().int().min(0);
const magnitude = z.number().min(0);
const precision = z.number().positive().max(1);
const runId = z.string().trim().min(1).max(200);

/** Dense rows, dense base64 or sparse triplets. The numbers themselves are read by a tight loop, see server/ingest/decode. */
export const matrix = z
  .union([
    z.array(z.array(wireNumber.nullable())),
    z.strictObject({ f64le: z.string() }),
    z.strictObject({
      rows: z.array(z.number().int().min(0)),
      columns: z.array(z.number().int().min(0)),
      values: z.array(wireNumber.nullable()),
    }),
  ])
  .meta({
    id: "Matrix",
    description:
      'Dense nested rows (rows = output elements); or {"f64le": base64 of little-endian binary64, row-major}; or sparse zero-based triplets, absent = structurally zero. null in a reference = not computed.',
  });
export const vector = z.union([z.array(wireNumber), z.strictObject({ f64le: z.string() })]).meta({ id: "Vector" });

export const cost = z.strictObject({
  evaluations: z.number().min(0).optional(),
  seconds: z.number().min(0).optional(),
});
export type Cost = z.infer<typeof cost>;

const VALUES_MAY_BE_MISSING =
  "May be left out of a block with at least one probe and no references: then only its probes are recorded, and its sizes count against no limit.";

/** A check that needs no full Jacobian. Its label is, if not given, its number among the probes of its kind, from 1. */
const probe = z
  .discriminatedUnion("kind", [
    z.strictObject({
      kind: z.literal("dot-product"),
      label: name.optional(),
      forward: wireNumber,
      reverse: wireNumber,
      scale: magnitude
        .optional()
        .meta({ description: "Size of the terms that were added: |w|.|J||v|, or a bound like ||w|| ||J v||." }),
      precision: precision
        .optional()
        .meta({ description: "Relative precision of the arithmetic, 2.2e-16 if not given." }),
    }),
    z.strictObject({
      kind: z.literal("taylor"),
      label: name.optional(),
      steps: z
        .array(z.number().positive())
        .min(2)
        .max(MAX_SWEEP_STEPS)
        .meta({ description: "Each smaller than the one before, or each larger." }),
      remainders: z.array(wireNumber).min(2).max(MAX_SWEEP_STEPS).meta({ description: "|f(x + h d) - f(x) - h g.d|" }),
      scale: magnitude
        .optional()
        .meta({ description: "|g.d|. Without it the slope of the remainders alone has to tell." }),
      value: magnitude.optional().meta({ description: "|f(x)|, from which the rounding of the remainders is known." }),
      precision: precision
        .optional()
        .meta({ description: "Relative precision of the values of f, 2.2e-16 if not given." }),
    }),
    z.strictObject({
      kind: z.literal("directional"),
      label: name.optional(),
      method: z.enum(REFERENCE_METHODS),
      step: z.number().positive().optional(),
      derivative: z.array(wireNumber).min(1).meta({ description: "J d, one number for each output element." }),
      reference: z.array(wireNumber).min(1).meta({ description: "The same by `method` at `step`." }),
    }),
  ])
  .meta({ id: "Probe", description: "Recorded and judged as a block of its own, beside that of the Jacobian." });
export type PostedProbe = z.infer<typeof probe>;

/**
 * The document's schema over any representation of the numbers: on the wire (`matrix`), or as holes that the
 * decoder fills (`z.unknown()`), so that both say the same of everything else.
 */
export function blockSchema<M extends z.ZodType, V extends z.ZodType, S extends z.ZodType>(numbers: {
  matrix: M;
  vector: V;
  step: S;
}) {
  const side = z.strictObject({
    name,
    size,
    unit: z.string().max(60).optional(),
    values: numbers.vector.optional(),
    elements: z.array(z.string().max(200)).optional(),
  });
  const sweepStep = z.strictObject({ step: numbers.step, values: numbers.matrix });
  const reference = z.strictObject({
    method: z.enum(REFERENCE_METHODS),
    step: numbers.step.optional(),
    stepKind: z.enum(STEP_KINDS).optional(),
    precision: precision.optional(),
    values: numbers.matrix.optional(),
    sweep: z.array(sweepStep).min(1).max(MAX_SWEEP_STEPS).optional(),
    columns: z.array(z.number().int().min(0)).optional(),
    uncertainty: z.union([z.number().min(0), numbers.matrix]).optional(),
    cost: cost.optional(),
  });
  return z.strictObject({
    model: modelName,
    point: name.default(DEFAULT_POINT),
    output: side,
    input: side,
    derivative: z.strictObject({
      method: z.enum(DERIVATIVE_METHODS),
      values: numbers.matrix.optional().meta({ description: VALUES_MAY_BE_MISSING }),
      cost: cost.optional(),
    }),
    references: z.array(reference).max(MAX_REFERENCES).default([]),
    probes: z.array(probe).max(MAX_PROBES).default([]),
    sources: z.array(z.string().max(500)).max(200).default([]),
  });
}

export function buildDocumentSchema<B extends z.ZodType>(block: B) {
  return z.strictObject({
    format: z.literal("clinograph.build/1"),
    commit,
    history: z.array(commit).max(10_000).default([]),
    lane: laneName.default(DEFAULT_LANE),
    run: z.strictObject({
      id: runId,
      url: z
        .url({ protocol: /^https?$/ })
        .max(2000)
        .optional(),
      startedAt: timestamp.optional(),
      finishedAt: timestamp.optional(),
    }),
    shard: z
      .strictObject({ index: z.number().int().min(0).max(9_999), count: z.number().int().min(1).max(10_000) })
      .refine((s) => s.index < s.count, { path: ["index"], message: "must be below count" })
      .optional(),
    blocks: z.array(block),
  });
}

const stepOnWire = z.union([z.number().positive(), z.array(z.number().positive())]);
/** The document as the API document describes it. */
export const buildDocument = buildDocumentSchema(blockSchema({ matrix, vector, step: stepOnWire })).meta({
  id: "BuildDocument",
  description: "One posting for one commit in one lane, possibly one shard of several.",
});
export type BuildDocument = z.input<typeof buildDocument>;

export const counts = z
  .object({
    entries: z.number().int(),
    agrees: z.number().int(),
    disagrees: z.number().int(),
    unresolved: z.number().int(),
    unreferenced: z.number().int(),
    invalid: z.number().int(),
  })
  .meta({ id: "Counts" });
export type Counts = z.infer<typeof counts>;
/** Probes by their worst verdict; they are no entries of Jacobians and counted beside them. */
export const probeCounts = z
  .object({
    agrees: z.number().int(),
    disagrees: z.number().int(),
    unresolved: z.number().int(),
    invalid: z.number().int(),
  })
  .meta({ id: "ProbeCounts" });
export type ProbeCounts = z.infer<typeof probeCounts>;
export const summaryCounts = counts
  .extend({
    probes: probeCounts,
    blocks: z.number().int(),
    /** Entries that this build did not check: they count with the verdict of an earlier one. */
    carried: z.number().int(),
  })
  .meta({ id: "SummaryCounts" });
export type SummaryCounts = z.infer<typeof summaryCounts>;

/** Answer to a posting. */
export const postedBuild = z
  .object({
    build: z.object({ id, url: z.string(), state: z.enum(BUILD_STATES), lane: laneName, commit: sha }),
    summary: summaryCounts,
    gate,
    breaks: z.array(breakBrief),
  })
  .meta({ id: "PostedBuild" });
export type PostedBuild = z.infer<typeof postedBuild>;

/** A build in lists and on its page. */
export const buildRow = z
  .object({
    id,
    url: z.string(),
    state: z.enum(BUILD_STATES),
    lane: laneName,
    commit: sha,
    branch: z.string().nullable(),
    subject: z.string().nullable(),
    author: z.string().nullable(),
    committedAt: timestamp.nullable(),
    receivedAt: timestamp,
    completedAt: timestamp.nullable(),
    /** True for the newest complete build of its commit and lane, the one that speaks for the commit. */
    current: z.boolean(),
    run: z.object({
      id: z.string(),
      url: z.string().nullable(),
      startedAt: timestamp.nullable(),
      finishedAt: timestamp.nullable(),
    }),
    shards: z.object({
      expected: z.number().int(),
      received: z.array(z.number().int()),
      missing: z.array(z.number().int()),
    }),
    /** The build it was compared with: the nearest judged ancestor in its lane. */
    baseline: z.object({ buildId: id, commit: sha }).nullable(),
    summary: summaryCounts,
    worstError: wireNumber.nullable(),
  })
  .meta({ id: "Build" });
export type BuildRow = z.infer<typeof buildRow>;

/** A build on its page. */
export const buildDetail = buildRow
  .extend({
    /** The shards that came, in the order of their numbers. */
    arrivals: z.array(z.object({ index: z.number().int(), receivedAt: timestamp, bytes: z.number().int() })),
  })
  .meta({ id: "BuildDetail" });
export type BuildDetail = z.infer<typeof buildDetail>;
