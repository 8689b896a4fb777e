import { DEFAULT_LIMITS } from "../../../shared/domain/limits.ts";
import type { Limits } from "../../../shared/domain/limits.ts";
import { DEFAULT_TOLERANCES } from "../../../shared/domain/tolerances.ts";
import { judgePosting } from "../../../server/ingest/judgePosting.ts";
import type { JudgedPosting } from "../../../server/ingest/judgePosting.ts";
import { RejectedPosting } from "../../../server/ingest/rejection.ts";
import type { Rejection } from "../../../server/ingest/rejection.ts";

/** JSON on its way to be spoilt: any place may hold anything. */
export type Json = null | boolean | number | string | Json[] | { [name: string]: Json };
export interface Document {
  [name: string]: Json;
}

/** A small valid block with one reference; `more` goes over it. */
export function block(more: Document = {}): Document {
  return {
    model: "rotor.thrust",
    output: { name: "thrust", size: 3, values: [1, 2, 3] },
    input: { name: "pitch", size: 2, values: [0.1, 0.2] },
    derivative: {
      method: "analytic",
      values: [
        [1, 2],
        [3, 4],
        [5, 6],
      ],
    },
    references: [
      {
        method: "complex-step",
        step: 1e-20,
        values: [
          [1, 2],
          [3, 4],
          [5, 6],
        ],
      },
    ],
    ...more,
  };
}

export function build(blocks: Json[] = [block()], more: Document = {}): Document {
  return { format: "clinograph.build/1", commit: { sha: "a".repeat(40) }, run: { id: "1" }, blocks, ...more };
}

export interface Sent {
  readonly encoding?: "identity" | "gzip";
  readonly limits?: Partial<Limits>;
}

/** Judges a document, a text or bytes. @throws RejectedPosting */
export function judge(
  sent: Document | string | Uint8Array,
  { encoding = "identity", limits }: Sent = {},
): JudgedPosting {
  const body =
    sent instanceof Uint8Array
      ? sent
      : new TextEncoder().encode(typeof sent === "string" ? sent : JSON.stringify(sent));
  return judgePosting({ body, encoding, limits: { ...DEFAULT_LIMITS, ...limits }, tolerances: DEFAULT_TOLERANCES });
}

/** What the posting is refused for; an error of another class, and a posting that is taken, are faults. */
export function refusal(sent: Document | string | Uint8Array, options: Sent = {}): Rejection {
  try {
    judge(sent, options);
  } catch (error) {
    if (error instanceof RejectedPosting) return error.rejection;
    throw error;
  }
  throw new Error("the posting was taken");
}

/** The places and sentences of an invalid document, as `pointer: detail`. */
export function mistakes(sent: Document | string): string[] {
  const rejection = refusal(sent);
  if (rejection.kind !== "invalid") throw new Error(JSON.stringify(rejection));
  return rejection.errors.map(({ pointer, detail }) => `${pointer}: ${detail}`);
}
