import { z } from "zod";
import { WAIVER_STATES } from "../domain/vocabulary.ts";
import { id, laneName, timestamp } from "./common.ts";

const glob = z.string().trim().min(1).max(200);
const indices = z.array(z.number().int().min(0)).min(1).max(10_000);
const blockFields = {
  model: glob.optional(),
  output: glob.optional(),
  input: glob.optional(),
  point: glob.optional(),
  lane: laneName.optional(),
};
const namesSomething = (s: object) => Object.values(s).some((v) => v !== undefined);

/** Names whole blocks. */
export const blockSelector = z
  .strictObject(blockFields)
  .refine(namesSomething, { message: "must name at least one field" })
  .meta({ id: "BlockSelector", description: "Names blocks by glob (* and ?); a missing field matches all." });

export const selector = z
  .strictObject({
    ...blockFields,
    /** Names probes, as "<kind>: <label>"; a selector with it covers no Jacobian. */
    probe: glob.optional(),
    rows: indices.optional(),
    columns: indices.optional(),
  })
  .refine(namesSomething, { message: "must name at least one field" })
  .meta({ id: "Selector", description: "Names blocks by glob (* and ?); a missing field matches all." });

export const createWaiver = z
  .strictObject({
    selector,
    reason: z.string().trim().min(1).max(5000),
    maxError: z.number().positive(),
    expiresAt: timestamp,
  })
  .meta({ id: "CreateWaiver" });
export const waiver = z
  .object({
    id,
    state: z.enum(WAIVER_STATES),
    selector,
    reason: z.string(),
    maxError: z.number(),
    expiresAt: timestamp,
    expired: z.boolean(),
    askedBy: z.string().nullable(),
    askedAt: timestamp,
    decidedBy: z.string().nullable(),
    decidedAt: timestamp.nullable(),
    abilities: z.record(z.string(), z.boolean()),
  })
  .meta({ id: "Waiver" });
export type WaiverRow = z.infer<typeof waiver>;
