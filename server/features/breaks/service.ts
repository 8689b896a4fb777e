import type { Context } from "../../context.ts";
import { Comment } from "../../db/models/Comment.ts";
import type { Project } from "../../db/models/Project.ts";
import type { Reader } from "../../db/reader.ts";
import type { PersonActor } from "../../http/actor.ts";
import { Invalid, NotFound } from "../../http/problem.ts";
import { audit } from "../audit/audit.ts";
import { loadBreak } from "./loadBreaks.ts";
import type { LoadedBreak } from "./loadBreaks.ts";
import type { LoadedComment } from "./present.ts";

/** @throws NotFound also for a break that was withdrawn and has no successor. */
export async function existingBreak(reader: Reader, projectId: number, breakId: number): Promise<LoadedBreak> {
  const found = await loadBreak(reader, projectId, breakId);
  if (found === null) throw new NotFound();
  return found;
}

/** Says who sees to a break; null takes it back. @throws Invalid for whoever is no member of the project. */
export async function assignBreak(
  context: Context,
  actor: PersonActor,
  project: Project,
  breakId: number,
  assignee: number | null,
): Promise<void> {
  await context.db.write(async (w) => {
    const found = await existingBreak(w, project.id, breakId);
    const name = assignee === null ? null : await memberName(w, project.id, assignee);
    await w.run("UPDATE breaks SET assigneeId = $2 WHERE id = $1", [found.id, assignee]);
    await audit(w, actor, "break.assign", {
      projectId: project.id,
      target: `break ${found.number}`,
      detail: { assignee: name },
    });
  });
}

async function memberName(reader: Reader, projectId: number, userId: number): Promise<string> {
  const [member] = await reader.select<{ name: string }>(
    `SELECT u.name FROM users u WHERE u.id = $2 AND u.disabledAt IS NULL
       AND (u.admin OR EXISTS (SELECT 1 FROM memberships m WHERE m.userId = u.id AND m.projectId = $1))`,
    [projectId, userId],
  );
  if (member === undefined) throw new Invalid([{ pointer: "#/assignee", detail: "is no member of this project" }]);
  return member.name;
}

export async function commentOnBreak(
  context: Context,
  actor: PersonActor,
  project: Project,
  breakId: number,
  body: string,
): Promise<LoadedComment> {
  return context.db.write(async (w) => {
    const found = await existingBreak(w, project.id, breakId);
    const comment = await w.create(Comment, { breakId: found.id, authorId: actor.id, body, createdAt: Date.now() });
    await audit(w, actor, "break.comment", { projectId: project.id, target: `break ${found.number}` });
    const { id, createdAt } = comment;
    return { id, authorId: actor.id, authorName: actor.name, body, createdAt };
  });
}

export function loadComments(reader: Reader, breakId: number): Promise<LoadedComment[]> {
  return reader.select<LoadedComment>(
    `SELECT c.id, c.authorId, u.name AS authorName, c.body, c.createdAt
     FROM comments c JOIN users u ON u.id = c.authorId WHERE c.breakId = $1 ORDER BY c.id`,
    [breakId],
  );
}
