import { z } from "zod";
import { MAX_CHECK_LIMIT } from "../domain/limits.ts";
import { GATE_CODES, GATE_SEVERITIES, VERDICTS } from "../domain/vocabulary.ts";
import { ROLES } from "../domain/roles.ts";
import { motionCounts } from "./block.ts";
import { summaryCounts } from "./build.ts";
import { blockSelector } from "./waiver.ts";
import { id, laneName, sha, slug, timestamp } from "./common.ts";

const commitUrlTemplate = z
  .string()
  .max(500)
  .regex(/^https?:\/\/\S*\{sha\}\S*$/, "must be an http(s) address with {sha} in it");
const tolerances = {
  rtol: z.number().positive().max(1),
  floorRel: z.number().min(0).max(1),
  floorAbs: z.number().min(0),
};

const toleranceRule = z
  .strictObject({
    selector: blockSelector,
    rtol: tolerances.rtol.optional(),
    floorRel: tolerances.floorRel.optional(),
    floorAbs: tolerances.floorAbs.optional(),
  })
  .meta({ id: "ToleranceRule", description: "Other tolerances for some blocks; later rules go over earlier ones." });

export const createProject = z
  .strictObject({
    slug,
    name: z.string().trim().min(1).max(200),
    defaultBranch: z.string().trim().min(1).max(250).default("main"),
    commitUrl: commitUrlTemplate.optional(),
  })
  .meta({ id: "CreateProject" });
export const patchProject = z
  .strictObject({
    name: z.string().trim().min(1).max(200).optional(),
    defaultBranch: z.string().trim().min(1).max(250).optional(),
    commitUrl: commitUrlTemplate.nullable().optional(),
    policy: z.partialRecord(z.enum(GATE_CODES), z.enum(GATE_SEVERITIES)).optional(),
    tolerances: z.strictObject(tolerances).partial().optional(),
    /** All rules: the list replaces the one before. They hold for builds posted from then on. */
    toleranceRules: z.array(toleranceRule).max(500).optional(),
    /** Builds after which an entry that was not checked again counts as unreferenced. */
    checkLimit: z.number().int().min(1).max(MAX_CHECK_LIMIT).optional(),
  })
  .meta({ id: "PatchProject" });

export const project = z
  .object({
    id,
    slug,
    name: z.string(),
    defaultBranch: z.string(),
    commitUrl: z.string().nullable(),
    policy: z.record(z.enum(GATE_CODES), z.enum(GATE_SEVERITIES)),
    tolerances: z.object(tolerances),
    toleranceRules: z.array(toleranceRule),
    checkLimit: z.number().int(),
    lanes: z.array(laneName),
    /** The caller's role; null for an administrator who is no member, and for tokens. */
    role: z.enum(ROLES).nullable(),
    abilities: z.record(z.string(), z.boolean()),
  })
  .meta({ id: "Project" });
export type Project = z.infer<typeof project>;

/** A row of the list of projects: where is trouble. */
export const projectRow = z
  .object({
    id,
    slug,
    name: z.string(),
    role: z.enum(ROLES).nullable(),
    lanes: z.array(laneName),
    openBreaks: z.number().int(),
    silentLanes: z.array(laneName),
    lastBuildAt: timestamp.nullable(),
    /** The last 60 commits of the liveliest lane, oldest first. */
    trace: z.array(z.object({ commit: sha, worstError: z.number().nullable(), verdict: z.enum(VERDICTS).nullable() })),
  })
  .meta({ id: "ProjectRow" });
export type ProjectRow = z.infer<typeof projectRow>;

/** Per model at the judged commit. */
export const modelRow = z
  .object({
    model: z.string(),
    blocks: z.array(z.object({ blockId: id, output: z.string(), input: z.string(), point: z.string() })),
    counts: summaryCounts,
    worst: z
      .object({
        blockId: id,
        row: z.number().int(),
        column: z.number().int(),
        error: z.number().nullable(),
        resolution: z.number().nullable(),
        verdict: z.enum(VERDICTS),
      })
      .nullable(),
    motion: motionCounts.nullable(),
    /** Share of the entries that have a reference, 0..1. */
    checkedShare: z.number(),
    /** Resolution of the weakest reference of its blocks; null where none tells. */
    resolution: z.number().nullable(),
    /** Share of the entries whose references can tell at their block's rtol, 0..1. */
    resolvedShare: z.number(),
  })
  .meta({ id: "ModelRow" });
export type ModelRow = z.infer<typeof modelRow>;

/** The overview: is this commit sound. */
export const overview = z
  .object({
    lane: laneName,
    commit: sha.nullable(),
    buildId: id.nullable(),
    subject: z.string().nullable(),
    author: z.string().nullable(),
    committedAt: timestamp.nullable(),
    baseline: z.object({ commit: sha, buildId: id }).nullable(),
    rtol: z.number(),
    counts: summaryCounts.nullable(),
    /** One sentence: what happened at this commit. */
    sentence: z.string(),
    openBreaks: z.array(
      z.object({
        id,
        number: z.number().int(),
        sentence: z.string(),
        onset: sha,
        suspectCount: z.number().int(),
        since: timestamp.nullable(),
      }),
    ),
    newBreaks: z.array(id),
    repairedBreaks: z.array(id),
    /** Open climbs as seen from the commit, and jumps of its own build. */
    climbs: z.array(
      z.object({
        kind: z.enum(["climb", "jump"]),
        /** True of a climb that is a jump which stayed. */
        jumped: z.boolean(),
        model: z.string(),
        decades: z.number(),
        builds: z.number().int(),
        entryCount: z.number().int(),
        sentence: z.string(),
        onset: sha,
        toldBy: sha,
        worst: z.object({ blockId: id, row: z.number().int(), column: z.number().int() }),
      }),
    ),
    silentLanes: z.array(
      z.object({ lane: laneName, lastBuildAt: timestamp.nullable(), commitsSince: z.number().int() }),
    ),
    vanishedBlocks: z.array(
      z.object({ blockId: id, model: z.string(), output: z.string(), input: z.string(), point: z.string() }),
    ),
    checkedShare: z.number().nullable(),
    /** Share of the entries whose references can tell at their block's rtol, and the weakest reference; `at` is the project's rtol. */
    resolution: z.object({ resolvedShare: z.number(), at: z.number(), weakest: z.number().nullable() }).nullable(),
    /** Share of the entries that would be resolved at each relative tolerance: the resolution curve. */
    resolutionCurve: z.array(z.object({ rtol: z.number(), share: z.number() })),
    models: z.array(modelRow),
  })
  .meta({ id: "Overview" });
export type Overview = z.infer<typeof overview>;
