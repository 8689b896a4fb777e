import { AuditEntry } from "../../db/models/AuditEntry.ts";
import type { Writer } from "../../db/write.ts";
import type { Caller } from "../../http/actor.ts";

/** The server itself: first start, clean-up. */
export const SYSTEM = { kind: "system", id: null, name: "server" } as const;
export type Doer = Pick<Caller, "kind" | "id" | "name"> | typeof SYSTEM;

interface Deed {
  readonly projectId?: number;
  /** What it was done to, in words that still say something when the row is gone. */
  readonly target: string;
  /** Small, and never a secret. */
  readonly detail?: Readonly<Record<string, unknown>>;
}

/** Records a deed in the transaction that does it: neither is kept without the other. */
export async function audit(writer: Writer, doer: Doer, action: string, deed: Deed): Promise<void> {
  await writer.create(AuditEntry, {
    at: Date.now(),
    actorKind: doer.kind,
    actorId: doer.id,
    actorName: doer.name,
    projectId: deed.projectId ?? null,
    action,
    target: deed.target,
    detail: JSON.stringify(deed.detail ?? {}),
  });
}
