import { z } from "zod";
import type { Limits } from "../../shared/domain/limits.ts";
import { blockSchema, buildDocumentSchema } from "../../shared/schemas/build.ts";
import type { Complaints } from "./complaints.ts";
import { RejectedPosting } from "./rejection.ts";
import { zodComplaints } from "./zodComplaints.ts";

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
  if (!parsed.success) throw invalid(zodComplaints(parsed.error, [], "is not a property of the format"));
  const probes = parsed.data.blocks.reduce((sum, block) => sum + block.probes.length, 0);
  if (probes > limits.blocks) throw tooMany(probes, "probes", limits.blocks);
  const entries = parsed.data.blocks.reduce((sum, block) => sum + entriesOf(block), 0);
  if (entries > limits.entries) throw tooMany(entries, "entries", limits.entries);
  const numbers = parsed.data.blocks.reduce((sum, block) => sum + entriesOf(block) * matricesOf(block), 0);
  const most = NUMBERS_PER_ENTRY * limits.entries;
  if (numbers > most) throw tooMany(numbers, "numbers in derivatives, references and sweeps", most);
  return parsed.data;
}

/** Sparse matrices take few bytes on the wire, whatever their size: what they unfold to is limited too. */
const NUMBERS_PER_ENTRY = 16;

/** True where a block comes without its Jacobian: its probes are all that is recorded. */
export function isProbedOnly({ derivative, references, probes }: SkeletonBlock): boolean {
  return derivative.values === undefined && probes.length > 0 && references.length === 0;
}

/**
 * Of an empty block the elements of its longer side count: they have values and names. Of a block that is probed only
 * the sizes are told and nothing of that size is kept.
 */
function entriesOf(block: SkeletonBlock): number {
  const { output, input, probes } = block;
  const ofProbes = probes.reduce((sum, probe) => sum + (probe.kind === "directional" ? probe.derivative.length : 1), 0);
  return ofProbes + (isProbedOnly(block) ? 0 : Math.max(1, output.size) * Math.max(1, input.size));
}

function matricesOf({ references }: SkeletonBlock): number {
  return references.reduce((sum, { sweep, uncertainty }) => {
    const stated = uncertainty === undefined || typeof uncertainty === "number" ? 0 : 1;
    return sum + (sweep?.length ?? 1) + stated;
  }, 1);
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
