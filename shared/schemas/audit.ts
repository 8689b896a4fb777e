import { z } from "zod";
import { id, timestamp } from "./common.ts";

export const ACTOR_KINDS = ["person", "token", "system"] as const;
export const auditEntry = z
  .object({
    id,
    at: timestamp,
    actor: z.object({ kind: z.enum(ACTOR_KINDS), name: z.string() }),
    action: z.string(),
    target: z.string(),
    detail: z.record(z.string(), z.unknown()),
  })
  .meta({ id: "AuditEntry", description: "Who did what, when." });
