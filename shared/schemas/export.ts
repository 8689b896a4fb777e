import { z } from "zod";
import { BREAK_STATES, MOTIONS } from "../domain/vocabulary.ts";
import { baseline } from "./baseline.ts";
import { carried, motionCounts, worst } from "./block.ts";
import { onsetKind, signature } from "./break.ts";
import { counts } from "./build.ts";
import { id, laneName, sha, slug, timestamp, wireNumber } from "./common.ts";
import { waiver } from "./waiver.ts";

export const EXPORT_KINDS = ["builds", "breaks", "waivers", "baselines"] as const;
export type ExportKind = (typeof EXPORT_KINDS)[number];
export const EXPORT_FORMATS = ["json", "csv"] as const;

const exportedSignature = signature.pick({ code: true, share: true, detail: true });

/** One block in one complete build. */
export const exportedBlock = z
  .object({
    commit: sha,
    committedAt: timestamp.nullable(),
    receivedAt: timestamp,
    lane: laneName,
    buildId: id,
    runId: z.string(),
    /** True for the build that speaks for its commit and lane. */
    speaks: z.boolean(),
    blockId: id,
    model: z.string(),
    output: z.string(),
    input: z.string(),
    point: z.string(),
    /** Of a probe, what it is; null for a Jacobian. */
    probe: z.string().nullable(),
    rows: z.number().int(),
    columns: z.number().int(),
    counts,
    carried: carried.nullable(),
    worst: worst.nullable(),
    rtol: z.number(),
    floor: wireNumber,
    /** What the weakest reference could see, relative; null without one. */
    resolution: wireNumber.nullable(),
    signatures: z.array(exportedSignature),
    motion: motionCounts.nullable(),
    /** Running numbers of the breaks that have entries of this block and are bad at this commit. */
    breaks: z.array(z.number().int()),
  })
  .meta({ id: "ExportedBlock" });
export type ExportedBlock = z.infer<typeof exportedBlock>;

export const exportedBreak = z
  .object({
    number: z.number().int(),
    id,
    state: z.enum(BREAK_STATES),
    lane: laneName,
    onset: sha,
    onsetAt: timestamp.nullable(),
    onsetBuildId: id,
    lastGood: sha.nullable(),
    repairedBy: sha.nullable(),
    kind: onsetKind,
    models: z.array(z.string()),
    entryCount: z.number().int(),
    worstError: wireNumber.nullable(),
    motion: z.enum(MOTIONS).nullable(),
    signatures: z.array(exportedSignature),
    /** Most likely first. */
    suspects: z.array(sha),
    assignee: z.string().nullable(),
    comments: z.array(z.object({ author: z.string(), at: timestamp, body: z.string() })),
  })
  .meta({ id: "ExportedBreak" });
export type ExportedBreak = z.infer<typeof exportedBreak>;

export const exportedWaiver = waiver.omit({ expired: true, abilities: true }).meta({ id: "ExportedWaiver" });
export type ExportedWaiver = z.infer<typeof exportedWaiver>;

export const exportDocument = z
  .object({
    format: z.literal("clinograph.export/1"),
    project: slug,
    lane: laneName.nullable(),
    from: timestamp.nullable(),
    to: timestamp.nullable(),
    caution: z.string(),
    builds: z.array(exportedBlock).optional(),
    breaks: z.array(exportedBreak).optional(),
    waivers: z.array(exportedWaiver).optional(),
    baselines: z.array(baseline).optional(),
  })
  .meta({ id: "Export", description: "The record, or the section of it that was asked for." });
export type ExportDocument = z.infer<typeof exportDocument>;

const moment = z
  .union([z.iso.date(), timestamp], { error: "must be a date or a time of ISO 8601" })
  .meta({ description: "A date (its first moment in UTC) or a time." });
export const exportQuery = z
  .strictObject({
    from: moment.optional(),
    to: moment.optional(),
    format: z.enum(EXPORT_FORMATS).optional(),
    kind: z.enum(EXPORT_KINDS).optional(),
    lane: laneName.optional(),
  })
  .refine(({ from, to }) => from === undefined || to === undefined || Date.parse(from) < Date.parse(to), {
    path: ["to"],
    message: "must be after from",
  });
