import { Op } from "sequelize";
import type { Role } from "../../../shared/domain/roles.ts";
import type { Context } from "../../context.ts";
import { Invitation } from "../../db/models/Invitation.ts";
import { Membership } from "../../db/models/Membership.ts";
import type { Project } from "../../db/models/Project.ts";
import { User } from "../../db/models/User.ts";
import type { Writer } from "../../db/write.ts";
import type { PersonActor } from "../../http/actor.ts";
import type { PageRequest } from "../../http/paging.ts";
import { Conflict, NotFound } from "../../http/problem.ts";
import { audit } from "../audit/audit.ts";
import { makeOneTimeLink } from "../invitations/oneTimeLink.ts";

export interface MemberRow {
  readonly id: number;
  readonly membership: Membership;
  readonly user: User;
}

/** Members in the order they came, one more than the page holds. */
export async function listMembers(project: Project, { limit, after }: PageRequest): Promise<MemberRow[]> {
  const memberships = await Membership.findAll({
    where: { projectId: project.id, ...(after === null ? {} : { id: { [Op.gt]: after } }) },
    order: [["id", "ASC"]],
    limit: limit + 1,
  });
  const users = await User.findAll({ where: { id: memberships.map((m) => m.userId) } });
  const byId = new Map(users.map((user) => [user.id, user]));
  return memberships.flatMap((membership) => {
    const user = byId.get(membership.userId);
    return user ? [{ id: membership.id, membership, user }] : [];
  });
}

interface MemberWish {
  readonly email: string;
  readonly name?: string | undefined;
  readonly role: Role;
}

/**
 * Makes a person a member. Who has no password yet gets a one-time link, returned here once.
 * @throws Conflict where they are a member already.
 */
export function addMember(
  context: Context,
  actor: PersonActor,
  project: Project,
  wish: MemberWish,
): Promise<MemberRow & { link: string | null }> {
  const email = wish.email.toLowerCase();
  return context.db.write(async (writer) => {
    const { transaction } = writer;
    const now = Date.now();
    const known = await User.findOne({ where: { email }, transaction });
    const name = wish.name ?? (email.split("@")[0] as string);
    const user = known ?? (await writer.create(User, { email, name, createdAt: now }));
    if (await Membership.findOne({ where: { userId: user.id, projectId: project.id }, transaction })) {
      throw new Conflict(`${email} is a member already.`);
    }
    const { role } = wish;
    const membership = await writer.create(Membership, {
      userId: user.id,
      projectId: project.id,
      role,
      createdAt: now,
    });
    const link =
      (user.passwordHash ?? null) === null
        ? await makeOneTimeLink(context, writer, {
            purpose: "invitation",
            userId: user.id,
            projectId: project.id,
            createdById: actor.id,
          })
        : null;
    await audit(writer, actor, "member.add", { projectId: project.id, target: email, detail: { role } });
    return { id: membership.id, membership, user, link };
  });
}

/** @throws NotFound */
async function findMember(writer: Writer, project: Project, userId: string): Promise<MemberRow> {
  const { transaction } = writer;
  const membership = await Membership.findOne({ where: { userId, projectId: project.id }, transaction });
  const user = membership === null ? null : await User.findByPk(membership.userId, { transaction });
  if (membership === null || user === null) throw new NotFound("No such member.");
  return { id: membership.id, membership, user };
}

/** @throws NotFound */
export function changeRole(
  context: Context,
  actor: PersonActor,
  project: Project,
  change: { readonly userId: string; readonly role: Role },
): Promise<MemberRow> {
  return context.db.write(async (writer) => {
    const row = await findMember(writer, project, change.userId);
    const detail = { from: row.membership.role, to: change.role };
    await writer.update(Membership, { role: change.role }, { id: row.id });
    await audit(writer, actor, "member.role", { projectId: project.id, target: row.user.email, detail });
    await row.membership.reload({ transaction: writer.transaction });
    return row;
  });
}

/** Ends a membership and the links that were to lead to it. @throws NotFound */
export async function removeMember(context: Context, actor: PersonActor, project: Project, id: string): Promise<void> {
  await context.db.write(async (writer) => {
    const row = await findMember(writer, project, id);
    await writer.destroy(Membership, { id: row.id });
    await writer.destroy(Invitation, { userId: row.user.id, projectId: project.id, usedAt: null });
    await audit(writer, actor, "member.remove", { projectId: project.id, target: row.user.email });
  });
}
