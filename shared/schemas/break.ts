import { z } from "zod";
import { BREAK_STATES, MOTIONS, SIGNATURE_SCOPES, SIGNATURES, VERDICTS } from "../domain/vocabulary.ts";
import { id, laneName, pageQuery, sha, timestamp, wireNumber } from "./common.ts";

export const commitBuild = z.object({ commit: sha, buildId: id }).meta({ id: "CommitBuild" });
const abilities = z.record(z.string(), z.boolean());

/** A break in the answer to a posting. */
export const breakBrief = z
  .object({ id, url: z.string(), state: z.enum(BREAK_STATES), onset: sha })
  .meta({ id: "BreakBrief" });

export const signature = z
  .object({
    code: z.enum(SIGNATURES),
    /** The narrowest place that holds what it explains: `row` of a row or entry, `column` of a column or entry. */
    scope: z.enum(SIGNATURE_SCOPES),
    row: z.number().int().nullable(),
    column: z.number().int().nullable(),
    /** Part of what disagrees or is invalid in that place; of a reference's signature, part of the block's entries. */
    share: z.number(),
    detail: z.string(),
    /** What explains the same numbers as well, a sentence each. */
    alternatives: z.array(z.string()),
  })
  .meta({ id: "Signature", description: "A recognised kind of mistake." });
export type Signature = z.infer<typeof signature>;

/** Why an onset has the suspects it has. */
export const onsetKind = z.enum(["after-good", "since-first-check", "fixed-between"]);

export const suspect = z
  .object({
    commit: sha,
    subject: z.string().nullable(),
    author: z.string().nullable(),
    committedAt: timestamp.nullable(),
    changedPaths: z.array(z.string()).nullable(),
    score: z.number(),
    why: z.array(z.string()),
    /** The commit in the project's forge, if the project has an address template. */
    url: z.string().nullable(),
  })
  .meta({ id: "Suspect" });

export const nextTest = z.object({ commit: sha, remainingAfter: z.number().int() }).meta({ id: "NextTest" });

const entryValues = z.object({
  commit: sha,
  buildId: id,
  derivative: wireNumber,
  reference: wireNumber.nullable(),
  uncertainty: wireNumber.nullable(),
  error: wireNumber.nullable(),
  verdict: z.enum(VERDICTS),
});
export const breakEntry = z
  .object({
    blockId: id,
    model: z.string(),
    output: z.string(),
    input: z.string(),
    point: z.string(),
    /** The probe that the entry is of, as "<kind>: <label>"; null for an entry of a Jacobian. */
    probe: z.string().nullable(),
    row: z.number().int(),
    column: z.number().int(),
    verdict: z.enum(VERDICTS),
    derivative: wireNumber,
    reference: wireNumber.nullable(),
    uncertainty: wireNumber.nullable(),
    error: wireNumber.nullable(),
    /** The same entry at the last good commit. */
    before: entryValues.nullable(),
  })
  .meta({ id: "BreakEntry" });
export type BreakEntry = z.infer<typeof breakEntry>;

/** A row of the list of breaks. */
export const breakRow = z
  .object({
    id,
    /** Running number within the project, for people. */
    number: z.number().int(),
    url: z.string(),
    state: z.enum(BREAK_STATES),
    lane: laneName,
    onset: commitBuild,
    onsetAt: timestamp.nullable(),
    onsetSubject: z.string().nullable(),
    onsetAuthor: z.string().nullable(),
    lastGood: commitBuild.nullable(),
    kind: onsetKind,
    suspectCount: z.number().int(),
    entryCount: z.number().int(),
    models: z.array(z.string()),
    /** Worst relative error among the entries at the onset. */
    worstError: wireNumber.nullable(),
    motion: z.enum(MOTIONS).nullable(),
    signatures: z.array(signature),
    repairedBy: commitBuild.nullable(),
    assignee: z.object({ id, name: z.string() }).nullable(),
    /** One sentence a person would write: what stopped agreeing. */
    sentence: z.string(),
  })
  .meta({ id: "BreakRow" });
export type BreakRow = z.infer<typeof breakRow>;

export const comment = z
  .object({ id, author: z.object({ id, name: z.string() }), body: z.string(), createdAt: timestamp })
  .meta({ id: "Comment" });

export const breakDetail = breakRow
  .extend({
    suspects: z.array(suspect),
    nextTest: nextTest.nullable(),
    entries: z.array(breakEntry),
    waiver: z.object({ id, reason: z.string(), maxError: z.number(), expiresAt: timestamp }).nullable(),
    comments: z.array(comment),
    abilities,
  })
  .meta({ id: "Break" });
export type BreakDetail = z.infer<typeof breakDetail>;

export const breaksQuery = z.strictObject({
  state: z.enum([...BREAK_STATES, "all"]).optional(),
  lane: laneName.optional(),
  ...pageQuery,
});
export const patchBreak = z.strictObject({ assignee: id.nullable() }).meta({ id: "PatchBreak" });
export const postComment = z.strictObject({ body: z.string().trim().min(1).max(20_000) }).meta({ id: "PostComment" });
