import { createHmac, timingSafeEqual } from "node:crypto";
import type { Context } from "../../context.ts";

/** What a page repeats with every change: only who can read our answers knows it. */
export function csrfTokenOf(context: Context, sessionId: string): string {
  return createHmac("sha256", context.keys.csrf).update(sessionId).digest("base64url");
}

export function csrfTokenMatches(context: Context, sessionId: string, given: string | undefined): boolean {
  const expected = Buffer.from(csrfTokenOf(context, sessionId));
  const actual = Buffer.from(given ?? "");
  return expected.length === actual.length && timingSafeEqual(expected, actual);
}
