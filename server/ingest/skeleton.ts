import { z } from "zod";
import type { Limits } from "../../shared/domain/limits.ts";
import { blockSchema, buildDocumentSchema } from "../../shared/schemas/build.ts";
import { Complaints } from "./complaints.ts";
import type { Path } from "./complaints.ts";
import { RejectedPosting } from "./rejection.ts";

/** The document with holes where its numbers are: those are read by tight loops, not element by element by zod. */
const hole = z.unknown();
const skeletonBlock = blockSchema({ matrix: hole, vector: hole, step: hole });
const skeletonDocument = buildDocumentSchema(skeletonBlock);
export type SkeletonBlock = z.infer<typeof skeletonBlock>;
export type SkeletonDocument = z.infer<typeof skeletonDocument>;

/**
 * Checks everything but the numbers, and that the sizes are within the limits, before anything large is allocated.
 * @throws RejectedPosting
 */
export function readSkeleton(document: unknown, limits: Limits): SkeletonDocument {
  const count = blockCount(document);
  if (count > limits.blocks) throw tooMany(count, "blocks", limits.blocks);
  const parsed = skeletonDocument.safeParse(document);
  if (!parsed.success) throw invalid(complaintsOf(parsed.error));
  const entries = parsed.data.blocks.reduce((sum, block) => sum + block.output.size * block.input.size, 0);
  if (entries > limits.entries) throw tooMany(entries, "entries", limits.entries);
  return parsed.data;
}

function blockCount(document: unknown): number {
  const blocks = (document as { blocks?: unknown } | null)?.blocks;
  return Array.isArray(blocks) ? blocks.length : 0;
}

function tooMany(count: number, what: string, limit: number): RejectedPosting {
  return new RejectedPosting({
    kind: "too-large",
    detail: `The build has ${count} ${what}, at most ${limit} are taken.`,
  });
}

export function invalid(complaints: Complaints): RejectedPosting {
  return new RejectedPosting({ kind: "invalid", errors: complaints.listed, more: complaints.more });
}

/** One line an issue; an unknown property is pointed at itself, so that a typing mistake is found at once. */
function complaintsOf(error: z.ZodError): Complaints {
  const complaints = new Complaints();
  for (const issue of error.issues) {
    const path = issue.path as Path;
    if (issue.code === "unrecognized_keys") {
      for (const key of issue.keys) complaints.add([...path, key], "is not a property of the format");
    } else {
      complaints.add(path, issue.message);
    }
  }
  return complaints;
}
