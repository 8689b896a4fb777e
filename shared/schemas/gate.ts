import { z } from "zod";
import { GATE_CODES, GATE_DECISIONS, GATE_SEVERITIES } from "../domain/vocabulary.ts";
import { id, laneName, sha } from "./common.ts";

export const gateReason = z
  .object({
    code: z.enum(GATE_CODES),
    severity: z.enum(GATE_SEVERITIES),
    message: z.string(),
    model: z.string().optional(),
    block: z.string().optional(),
    row: z.number().int().optional(),
    column: z.number().int().optional(),
    breakId: id.optional(),
  })
  .meta({ id: "GateReason" });

export const gate = z
  .object({
    decision: z.enum(GATE_DECISIONS),
    lane: laneName,
    commit: sha,
    base: sha.nullable(),
    reasons: z.array(gateReason),
    url: z.string(),
  })
  .meta({ id: "Gate", description: "The answer to: may this be merged." });
export type Gate = z.infer<typeof gate>;

export const gateQuery = z.strictObject({ commit: sha, lane: laneName.optional(), base: sha.optional() });
