import { randomBytes } from "node:crypto";
import type { Context } from "../../context.ts";
import { Invitation } from "../../db/models/Invitation.ts";
import type { Writer } from "../../db/write.ts";
import { hashSecret } from "../tokens/tokenText.ts";

const DAY_MS = 24 * 60 * 60 * 1000;
const LIFE_MS = { "set-up": DAY_MS, invitation: 7 * DAY_MS } as const;
const PAGE = { "set-up": "set-up", invitation: "invitation" } as const;

interface LinkWish {
  readonly purpose: keyof typeof LIFE_MS;
  readonly userId: number | null;
  readonly projectId: number | null;
  readonly createdById: number | null;
}

/**
 * Makes a link that works once. Its secret is behind the #, which browsers neither send nor log; only its hash is kept.
 */
export async function makeOneTimeLink(context: Context, writer: Writer, wish: LinkWish): Promise<string> {
  const secret = randomBytes(24).toString("base64url");
  const now = Date.now();
  await writer.create(Invitation, {
    tokenHash: hashSecret(secret),
    purpose: wish.purpose,
    userId: wish.userId,
    projectId: wish.projectId,
    createdById: wish.createdById,
    createdAt: now,
    expiresAt: now + LIFE_MS[wish.purpose],
  });
  return `${context.config.publicUrl}/${PAGE[wish.purpose]}#${secret}`;
}
