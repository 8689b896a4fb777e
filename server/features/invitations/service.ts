import type { Context } from "../../context.ts";
import { Invitation } from "../../db/models/Invitation.ts";
import { User } from "../../db/models/User.ts";
import type { Writer } from "../../db/write.ts";
import { Conflict, NotFound } from "../../http/problem.ts";
import { audit } from "../audit/audit.ts";
import { hashPassword } from "../session/password.ts";
import { hashSecret } from "../tokens/tokenText.ts";

const GONE = "This link is not valid: it was used, has expired, or is cut off.";

/** @throws NotFound where the link does not work (any more). */
async function openLink(secret: string, purpose: Invitation["purpose"], writer?: Writer): Promise<Invitation> {
  const invitation = await Invitation.findOne({
    where: { tokenHash: hashSecret(secret), purpose },
    transaction: writer?.transaction ?? null,
  });
  if (invitation === null || invitation.usedAt !== null || invitation.expiresAt <= Date.now()) throw new NotFound(GONE);
  return invitation;
}

/** Hashing is slow on purpose: it is done for those who have a link, and outside the transaction. */
async function hashForLink(
  given: { readonly token: string; readonly password: string },
  purpose: Invitation["purpose"],
): Promise<string> {
  await openLink(given.token, purpose);
  return hashPassword(given.password);
}

interface FirstPerson {
  readonly token: string;
  readonly email: string;
  readonly name: string;
  readonly password: string;
}

/** Makes the first administrator. @throws NotFound, Conflict */
export async function setUp(context: Context, given: FirstPerson): Promise<User> {
  const passwordHash = await hashForLink(given, "set-up");
  return context.db.write(async (writer) => {
    const invitation = await openLink(given.token, "set-up", writer);
    if ((await User.count({ transaction: writer.transaction })) > 0) {
      throw new Conflict("There is an administrator already.");
    }
    const email = given.email.toLowerCase();
    const user = await writer.create(User, {
      email,
      name: given.name,
      passwordHash,
      admin: true,
      createdAt: Date.now(),
    });
    await writer.update(Invitation, { usedAt: Date.now() }, { id: invitation.id });
    await audit(writer, { kind: "person", id: user.id, name: user.name }, "instance.set-up", { target: email });
    return user;
  });
}

/**
 * Sets name and password of the person invited, ends their other links and every session they had.
 * @throws NotFound
 */
export async function acceptInvitation(
  context: Context,
  given: { readonly token: string; readonly name: string; readonly password: string },
): Promise<User> {
  const passwordHash = await hashForLink(given, "invitation");
  return context.db.write(async (writer) => {
    const { transaction } = writer;
    const { userId, projectId } = await openLink(given.token, "invitation", writer);
    const user = userId === null ? null : await User.findByPk(userId, { transaction });
    if (user === null || user.disabledAt !== null) throw new NotFound(GONE);
    const { name } = given;
    await writer.update(User, { name, passwordHash, sessionVersion: user.sessionVersion + 1 }, { id: user.id });
    await writer.update(Invitation, { usedAt: Date.now() }, { userId: user.id, usedAt: null });
    const doer = { kind: "person", id: user.id, name } as const;
    await audit(writer, doer, "person.accept", { target: user.email, projectId: projectId ?? undefined });
    return user.reload({ transaction });
  });
}
