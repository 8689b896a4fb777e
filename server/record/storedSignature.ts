import type { Signature } from "../../shared/schemas/break.ts";

/** A signature as the record has it; older ones do not tell where in the block. */
export type StoredSignature = Pick<Signature, "code" | "share" | "detail"> & Partial<Signature>;

export function presentSignature(stored: StoredSignature): Signature {
  const { code, scope, row, column, share, detail, alternatives } = stored;
  return {
    code,
    scope: scope ?? "block",
    row: row ?? null,
    column: column ?? null,
    share,
    detail,
    alternatives: alternatives ?? [],
  };
}
