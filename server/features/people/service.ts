import { Op } from "sequelize";
import type { Context } from "../../context.ts";
import { User } from "../../db/models/User.ts";
import type { PersonActor } from "../../http/actor.ts";
import type { PageRequest } from "../../http/paging.ts";
import { Conflict, NotFound } from "../../http/problem.ts";
import { audit } from "../audit/audit.ts";
import { makeOneTimeLink } from "../invitations/oneTimeLink.ts";

/** In the order they came, one more than the page holds. */
export function listPeople({ limit, after }: PageRequest): Promise<User[]> {
  const where = after === null ? {} : { id: { [Op.gt]: after } };
  return User.findAll({ where, order: [["id", "ASC"]], limit: limit + 1 });
}

interface PersonChange {
  readonly admin?: boolean | undefined;
  readonly disabled?: boolean | undefined;
}

/** Closing an account ends its sessions. @throws NotFound; Conflict for one's own account. */
export function patchPerson(context: Context, actor: PersonActor, id: string, change: PersonChange): Promise<User> {
  return context.db.write(async (writer) => {
    const user = await User.findByPk(id, { transaction: writer.transaction });
    if (user === null) throw new NotFound("No such person.");
    if (user.id === actor.id) throw new Conflict("Another administrator has to do this: it is your own account.");
    const disabled = change.disabled ?? user.disabledAt !== null;
    await writer.update(
      User,
      {
        admin: change.admin ?? user.admin,
        disabledAt: disabled ? (user.disabledAt ?? Date.now()) : null,
        sessionVersion: user.sessionVersion + (change.disabled === true ? 1 : 0),
      },
      { id: user.id },
    );
    await audit(writer, actor, "person.edit", { target: user.email, detail: { ...change } });
    return user.reload({ transaction: writer.transaction });
  });
}

/** For whoever lost a password or an invitation. @throws NotFound */
export function linkForPerson(context: Context, actor: PersonActor, id: string): Promise<string> {
  return context.db.write(async (writer) => {
    const user = await User.findByPk(id, { transaction: writer.transaction });
    if (user === null || user.disabledAt !== null) throw new NotFound("No such person.");
    await audit(writer, actor, "person.link", { target: user.email });
    return makeOneTimeLink(context, writer, {
      purpose: "invitation",
      userId: user.id,
      projectId: null,
      createdById: actor.id,
    });
  });
}
