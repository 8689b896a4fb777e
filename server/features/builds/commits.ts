import type { CommitDocument } from "../../../shared/schemas/commit.ts";
import type { Context } from "../../context.ts";
import type { Project } from "../../db/models/Project.ts";
import { RecordConflict } from "../../record/conflict.ts";
import { storeCommits } from "../../record/storeCommits.ts";
import { settleProject } from "../../trace/settleProject.ts";
import { problemOf } from "./post.ts";

/** Adds commits and tells the breaks of every lane anew: new commits may be suspects. */
export async function postCommitHistory(
  context: Context,
  project: Project,
  commits: readonly CommitDocument[],
): Promise<{ known: number; added: number }> {
  try {
    return await context.db.write(async (w) => {
      const added = await storeCommits(w, project.id, commits);
      await settleProject(w, context.judge, project.id, null, Date.now());
      const [{ known }] = await w.select<{ known: number }>(
        "SELECT count(*) AS known FROM commits WHERE projectId = $1",
        [project.id],
      );
      return { known, added };
    });
  } catch (error) {
    throw error instanceof RecordConflict ? problemOf(error) : error;
  }
}
