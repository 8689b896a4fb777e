import type { PostedBuild } from "../../../shared/schemas/build.ts";
import type { Context } from "../../context.ts";
import type { Project } from "../../db/models/Project.ts";
import { Conflict, NotFound } from "../../http/problem.ts";
import { finishBuild } from "../../trace/finishBuild.ts";
import { composeAnswer } from "./answer.ts";

interface Receiving {
  readonly buildId: number;
  readonly projectId: number;
  readonly laneId: number;
  readonly state: "receiving" | "complete";
  readonly shardCount: number;
}

const SELECT = "SELECT id AS buildId, projectId, laneId, state, shardCount FROM builds";

/**
 * Completes a build without the shards that did not come, and records which. Closing a complete build again changes
 * nothing.
 * @throws Conflict when no shard came at all; NotFound.
 */
export async function closeBuild(context: Context, project: Project, buildId: number): Promise<PostedBuild> {
  return context.db.write(async (w) => {
    const now = Date.now();
    const [build] = await w.select<Receiving>(`${SELECT} WHERE id = $1 AND projectId = $2`, [buildId, project.id]);
    if (build === undefined) throw new NotFound();
    if (build.state === "receiving") {
      const shards = await w.select<{ position: number }>("SELECT position FROM shards WHERE buildId = $1", [buildId]);
      if (shards.length === 0) throw new Conflict("No shard of this build has come yet.");
      const came = new Set(shards.map((shard) => shard.position));
      const missing = Array.from({ length: build.shardCount }, (_, at) => at).filter((at) => !came.has(at));
      await finishBuild(w, context.judge, build, missing, now);
    }
    return composeAnswer(w, project, buildId, context.config.publicUrl, now);
  });
}

/**
 * Completes builds whose shards are all here but which were not judged against their lane yet: answered with 202, or
 * stored just before the server was stopped. One transaction a build.
 */
export async function completePending(context: Context): Promise<number> {
  const pending = await context.db.select<Receiving>(
    `${SELECT} b
     WHERE state = 'receiving' AND shardCount = (SELECT count(*) FROM shards s WHERE s.buildId = b.id) ORDER BY id`,
  );
  for (const { buildId } of pending) {
    await context.db.write(async (w) => {
      const now = Date.now();
      const [build] = await w.select<Receiving>(`${SELECT} WHERE id = $1`, [buildId]);
      if (build?.state !== "receiving") return;
      await finishBuild(w, context.judge, build, [], now);
    });
  }
  return pending.length;
}
