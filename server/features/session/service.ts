import { Op } from "sequelize";
import type { Context } from "../../context.ts";
import { EndedSession } from "../../db/models/EndedSession.ts";
import { User } from "../../db/models/User.ts";
import type { PersonActor } from "../../http/actor.ts";
import { Invalid, SignInFailed } from "../../http/problem.ts";
import { audit } from "../audit/audit.ts";
import { hashPassword, passwordMatches } from "./password.ts";

/** @throws SignInFailed, TooManyRequests */
export async function signIn(context: Context, given: { email: string; password: string }, ip: string): Promise<User> {
  const email = given.email.toLowerCase();
  await context.signInLimits.attempt(email, ip);
  const user = await User.findOne({ where: { email } });
  const matches = await passwordMatches(given.password, user?.passwordHash ?? null);
  if (user === null || !matches || user.disabledAt !== null) throw new SignInFailed();
  await context.signInLimits.succeeded(email, ip);
  return user;
}

/** The cookie's copies, wherever they are, open nothing from now on. */
export async function endSession(context: Context, actor: PersonActor): Promise<void> {
  await context.db.write(async (writer) => {
    await writer.destroy(EndedSession, { expiresAt: { [Op.lt]: Date.now() } });
    await writer.create(EndedSession, { sessionId: actor.sessionId, expiresAt: actor.sessionEndsAt });
  });
}

/** Sets a new password and ends every session of the person. @throws Invalid when the present one is not right. */
export async function changePassword(
  context: Context,
  actor: PersonActor,
  given: { current: string; password: string },
  ip: string,
): Promise<User> {
  await context.signInLimits.attempt(actor.email, ip);
  const user = await User.findByPk(actor.id, { rejectOnEmpty: true });
  if (!(await passwordMatches(given.current, user.passwordHash))) {
    throw new Invalid([{ pointer: "#/current", detail: "is not your present password" }]);
  }
  await context.signInLimits.succeeded(actor.email, ip);
  const passwordHash = await hashPassword(given.password);
  return context.db.write(async (writer) => {
    const sessionVersion = user.sessionVersion + 1;
    await writer.update(User, { passwordHash, sessionVersion }, { id: user.id });
    await audit(writer, actor, "person.password", { target: user.email });
    return User.findByPk(user.id, { transaction: writer.transaction, rejectOnEmpty: true });
  });
}
