import { z } from "zod";
import { SCOPES } from "../domain/roles.ts";
import { id, timestamp } from "./common.ts";

export const createToken = z
  .strictObject({
    name: z.string().trim().min(1).max(100),
    scopes: z.array(z.enum(SCOPES)).min(1).max(2),
    expiresAt: timestamp.optional(),
  })
  .meta({ id: "CreateToken" });
export const tokenRow = z
  .object({
    id,
    name: z.string(),
    prefix: z.string(),
    scopes: z.array(z.enum(SCOPES)),
    createdBy: z.string().nullable(),
    createdAt: timestamp,
    lastUsedAt: timestamp.nullable(),
    expiresAt: timestamp.nullable(),
  })
  .meta({ id: "Token" });
export type TokenRow = z.infer<typeof tokenRow>;
/** The only time that the token itself is told. */
export const createdToken = tokenRow.extend({ token: z.string() }).meta({ id: "CreatedToken" });
