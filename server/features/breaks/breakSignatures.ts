import type { Signature } from "../../../shared/schemas/break.ts";
import { presentSignature } from "../../record/storedSignature.ts";
import type { StoredSignature } from "../../record/storedSignature.ts";

/** Signatures told of one break. */
const MOST_TOLD = 10;

/** What was recognised in one block at the onset, and the entries of it that belong to the break. */
export interface RecognisedBlock {
  readonly columns: number;
  /** Flat indices. */
  readonly entries: Uint32Array;
  readonly signatures: readonly StoredSignature[];
}

/**
 * The signatures of a break: those whose place holds entries of it, those of most entries first and what is said of
 * references last. What several blocks share is told once.
 */
export function signaturesOfBreak(blocks: readonly RecognisedBlock[]): Signature[] {
  const told = new Map<string, { readonly signature: Signature; readonly touched: number }>();
  for (const { columns, entries, signatures } of blocks) {
    for (const signature of signatures.map(presentSignature)) {
      const key = `${signature.code} ${signature.detail}`;
      const touched = touchedBy(signature, columns, entries) + (told.get(key)?.touched ?? 0);
      if (touched > 0) told.set(key, { signature, touched });
    }
  }
  return [...told.values()]
    .sort((a, b) => isOfReference(a) - isOfReference(b) || b.touched - a.touched)
    .slice(0, MOST_TOLD)
    .map(({ signature }) => signature);
}

function touchedBy({ row, column }: Signature, columns: number, entries: Uint32Array): number {
  let count = 0;
  for (const k of entries) {
    count += Number((row === null || Math.floor(k / columns) === row) && (column === null || k % columns === column));
  }
  return count;
}

function isOfReference({ signature }: { readonly signature: Signature }): number {
  return Number(signature.code.startsWith("reference"));
}
