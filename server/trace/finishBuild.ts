import type { Writer } from "../db/write.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import { completeBuild } from "../record/storePosting.ts";
import { settleProject } from "./settleProject.ts";
import type { Arrival } from "./settleProject.ts";

/** Completes a build, `missing` shards aside, and judges it against its lane. */
export async function finishBuild(
  w: Writer,
  judge: JudgePool,
  build: Arrival & { readonly projectId: number },
  missing: readonly number[],
  now: number,
): Promise<void> {
  await completeBuild(w, build.buildId, missing, now);
  await settleProject(w, judge, build.projectId, build, now);
}
