import type { z } from "zod";
import { Complaints } from "../ingest/complaints.ts";
import type { Path } from "../ingest/complaints.ts";
import { Invalid } from "./problem.ts";

type Issue = z.core.$ZodIssue;

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
  const complaints = new Complaints();
  for (const issue of error.issues) complain(complaints, issue as Issue, root);
  return new Invalid(complaints.listed, complaints.more);
}

function complain(complaints: Complaints, issue: Issue, root: Path): void {
  const path = [...root, ...issue.path.map((part) => (typeof part === "number" ? part : String(part)))];
  if (issue.code === "unrecognized_keys") {
    for (const key of issue.keys) complaints.add([...path, key], "is not a field that this address knows");
  } else {
    complaints.add(path, issue.message);
  }
}
