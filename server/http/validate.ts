import type { z } from "zod";
import type { Path } from "../ingest/complaints.ts";
import { zodComplaints } from "../ingest/zodComplaints.ts";
import { Invalid } from "./problem.ts";

/**
 * Parses a value with a schema.
 * @throws Invalid, with a pointer for each place; `root` is put before every path.
 */
export function parseWith<S extends z.ZodType>(schema: S, value: unknown, root: Path = []): z.output<S> {
  const parsed = schema.safeParse(value, { reportInput: false });
  if (!parsed.success) throw invalidFrom(parsed.error, root);
  return parsed.data;
}

export function invalidFrom(error: z.ZodError, root: Path): Invalid {
  const { listed, more } = zodComplaints(error, root, "is not a field that this address knows");
  return new Invalid(listed, more);
}

/** Milliseconds of a time that must lie ahead. @throws Invalid, at `pointer` */
export function timeToCome(text: string, pointer: string, now: number): number {
  const at = Date.parse(text);
  if (at <= now) throw new Invalid([{ pointer, detail: "must be in the future" }]);
  return at;
}
