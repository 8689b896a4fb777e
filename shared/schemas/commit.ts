import { z } from "zod";
import { sha, timestamp } from "./common.ts";

const path = z.string().min(1).max(1000);
export const commit = z
  .strictObject({
    sha,
    parents: z.array(sha).max(100).optional(),
    branch: z.string().min(1).max(250).optional(),
    subject: z.string().max(500).optional(),
    author: z.strictObject({ name: z.string().max(200).optional(), email: z.string().max(320).optional() }).optional(),
    committedAt: timestamp.optional(),
    changedPaths: z.array(path).max(10_000).optional(),
  })
  .meta({
    id: "Commit",
    description: "A commit as a posting tells it; what is left out is not changed in the record.",
  });
export type CommitDocument = z.infer<typeof commit>;

export const postCommits = z.strictObject({ commits: z.array(commit).min(1).max(10_000) }).meta({ id: "PostCommits" });
export const postedCommits = z
  .object({ known: z.number().int(), added: z.number().int() })
  .meta({ id: "PostedCommits" });

/** One column of the strip: a commit of the lane in commit order. */
export const stripColumn = z
  .object({
    commit: sha,
    subject: z.string().nullable(),
    author: z.string().nullable(),
    committedAt: timestamp.nullable(),
    branch: z.string().nullable(),
    /** False for a commit that is not on the default branch (drawn as the thinner trace). */
    mainline: z.boolean(),
    parents: z.array(sha),
    buildId: z.string().nullable(),
    state: z.enum(["complete", "receiving"]).nullable(),
    /** Worst relative error of the build's judged entries; null when nothing could be judged. */
    worstError: z.number().nullable(),
    /** Worst verdict present, in the order invalid, disagrees, unresolved, agrees. */
    verdict: z.enum(["agrees", "disagrees", "unresolved", "unreferenced", "invalid"]).nullable(),
    counts: z
      .object({
        entries: z.number().int(),
        agrees: z.number().int(),
        disagrees: z.number().int(),
        unresolved: z.number().int(),
        unreferenced: z.number().int(),
        invalid: z.number().int(),
      })
      .nullable(),
    worst: z
      .object({
        model: z.string(),
        output: z.string(),
        input: z.string(),
        /** The probe that it is, or null for an entry of a Jacobian. */
        probe: z.string().nullable(),
        row: z.number().int(),
        column: z.number().int(),
      })
      .nullable(),
  })
  .meta({ id: "StripColumn" });
export type StripColumn = z.infer<typeof stripColumn>;

export const strip = z
  .object({
    lane: z.string(),
    rtol: z.number(),
    columns: z.array(stripColumn),
    /** Open breaks with the columns their suspects span. */
    brackets: z.array(z.object({ breakId: z.string(), onset: sha, suspects: z.array(sha) })),
  })
  .meta({ id: "Strip", description: "The commit-by-commit record of a lane, oldest first." });
export type Strip = z.infer<typeof strip>;
