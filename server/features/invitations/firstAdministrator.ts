import type { Context } from "../../context.ts";
import { Invitation } from "../../db/models/Invitation.ts";
import { User } from "../../db/models/User.ts";
import { audit, SYSTEM } from "../audit/audit.ts";
import { hashPassword } from "../session/password.ts";
import { makeOneTimeLink } from "./oneTimeLink.ts";

/**
 * While nobody is known, makes the administrator that the settings name, or else a one-time set-up link, which is
 * returned; links printed by earlier starts stop working.
 */
export async function ensureAdministrator(context: Context): Promise<string | null> {
  if ((await User.count()) > 0) return null;
  const { administrator } = context.config;
  if (administrator === null) {
    return context.db.write(async (writer) => {
      await writer.destroy(Invitation, { purpose: "set-up" });
      return makeOneTimeLink(context, writer, { purpose: "set-up", userId: null, projectId: null, createdById: null });
    });
  }
  const passwordHash = await hashPassword(administrator.password);
  const { email } = administrator;
  await context.db.write(async (writer) => {
    await writer.create(User, { email, name: "Administrator", passwordHash, admin: true, createdAt: Date.now() });
    await audit(writer, SYSTEM, "instance.set-up", { target: email });
  });
  return null;
}
