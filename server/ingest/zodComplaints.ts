import type { z } from "zod";
import { Complaints } from "./complaints.ts";
import type { Path } from "./complaints.ts";

/**
 * What a schema found wrong, one line an issue; an unknown property is pointed at itself, so that a typing mistake is
 * found at once. `root` is put before every path, `unknown` says what an unknown property is.
 */
export function zodComplaints(error: z.ZodError, root: Path, unknown: string): Complaints {
  const complaints = new Complaints();
  for (const issue of error.issues) {
    const path = [...root, ...(issue.path as Path)];
    if (issue.code === "unrecognized_keys") {
      for (const key of issue.keys) complaints.add([...path, key], unknown);
    } else {
      // A schema that takes anything says of nothing at all only that it is "nonoptional".
      const missing = issue.code === "invalid_type" && issue.expected === "nonoptional";
      complaints.add(path, missing ? "is missing" : issue.message);
    }
  }
  return complaints;
}
