import type { BlockNumbers, ReferenceFinding } from "../types.ts";

/** Entries per reference that were set aside, and those in conflict. */
export interface FindingCounts {
  readonly droppedImaginary: Uint32Array;
  readonly sawNoChange: Uint32Array;
  conflicts: number;
}

export function newFindingCounts(references: number): FindingCounts {
  return { droppedImaginary: new Uint32Array(references), sawNoChange: new Uint32Array(references), conflicts: 0 };
}

/** What the references of a block told about themselves, in posted order; only what concerns an entry at all. */
export function findingsOf(block: BlockNumbers, counts: FindingCounts): ReferenceFinding[] {
  const findings: ReferenceFinding[] = [];
  const add = (code: ReferenceFinding["code"], reference: number | null, entries: number | undefined) => {
    if (entries !== undefined && entries > 0) findings.push({ code, reference, entries });
  };
  block.references.forEach((reference, k) => {
    add("reference-not-finite", k, reference.notFinite);
    add("reference-dropped-imaginary", k, counts.droppedImaginary[k]);
    add("reference-saw-no-change", k, counts.sawNoChange[k]);
  });
  add("references-conflict", null, counts.conflicts);
  return findings;
}
