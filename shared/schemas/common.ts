import { z } from "zod";
import { PAGE_LIMIT } from "../domain/limits.ts";

/** Opaque id. */
export const id = z.string().min(1).max(64).meta({ id: "Id", description: "Opaque identifier." });
/** Full commit hash: SHA-1 or SHA-256, lower case. */
export const sha = z
  .string()
  .regex(/^([0-9a-f]{40}|[0-9a-f]{64})$/, "must be 40 or 64 lower-case hex digits")
  .meta({ id: "CommitSha", description: "Full commit hash, 40 or 64 lower-case hex digits." });
export const slug = z
  .string()
  .regex(/^[a-z0-9]([a-z0-9-]{0,62}[a-z0-9])?$/, "must be lower-case letters, digits and hyphens, at most 64")
  .meta({ id: "Slug", description: "Name of a project in addresses." });
export const laneName = z.string().trim().min(1).max(100);
export const timestamp = z.iso
  .datetime({ offset: true })
  .meta({ id: "Timestamp", description: "ISO 8601 / RFC 3339." });

/** A number that JSON cannot spell is one of three words. */
export const wireNumber = z
  .union([z.number(), z.enum(["NaN", "Infinity", "-Infinity"])])
  .meta({ id: "WireNumber", description: 'A number; not finite as "NaN", "Infinity" or "-Infinity".' });
export type WireNumber = z.infer<typeof wireNumber>;

/** Turns a number into what JSON can carry. */
export function toWire(value: number): WireNumber {
  if (Number.isFinite(value)) return value;
  return Number.isNaN(value) ? "NaN" : value > 0 ? "Infinity" : "-Infinity";
}
/** The same where NaN stands for "there is none". */
export function toWireOrNull(value: number): WireNumber | null {
  return Number.isNaN(value) ? null : toWire(value);
}
/** Reads a wire number back. */
export function fromWire(value: WireNumber): number {
  return typeof value === "number" ? value : Number(value);
}

/** Text in the query string is text: numbers are parsed here, and only plain ones. */
export const queryInteger = (min: number, max: number) =>
  z
    .string()
    .regex(/^\d{1,9}$/, "must be a whole number")
    .transform(Number)
    .pipe(z.number().int().min(min).max(max));
export const pageQuery = {
  limit: queryInteger(1, PAGE_LIMIT.max).optional(),
  cursor: z.string().max(200).optional(),
};

/** A page of a list. */
export const page = <T extends z.ZodType>(item: T) => z.object({ items: z.array(item), next: z.string().nullable() });

export const problem = z
  .looseObject({
    type: z.string(),
    title: z.string(),
    status: z.number().int(),
    detail: z.string().optional(),
    instance: z.string().optional(),
    errors: z.array(z.object({ pointer: z.string(), detail: z.string() })).optional(),
    moreErrors: z.number().int().optional(),
  })
  .meta({ id: "Problem", description: "RFC 9457 problem details." });
export type Problem = z.infer<typeof problem>;
