import { judgePosting } from "../../server/ingest/judgePosting.ts";
import type { JudgedPosting } from "../../server/ingest/judgePosting.ts";
import { completeBuild, storePosting } from "../../server/record/storePosting.ts";
import { settleProject } from "../../server/trace/settleProject.ts";
import { DEFAULT_LIMITS } from "../../shared/domain/limits.ts";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import type { TestRecord } from "../../tests/support/record.ts";

export function judged(document: BuildDocument): JudgedPosting {
  const body = new TextEncoder().encode(JSON.stringify(document));
  return judgePosting({ body, encoding: "identity", limits: DEFAULT_LIMITS, tolerances: DEFAULT_TOLERANCES });
}

/** Stores many builds at once, the numbers of each judged once: what postings would leave in the record. */
export async function storeBuilds(record: TestRecord, postings: readonly JudgedPosting[]): Promise<void> {
  const { context, project } = record;
  await context.db.write(async (w) => {
    let last = { laneId: 0, buildId: 0 };
    for (const posting of postings) {
      last = await storePosting(w, project.id, posting, DEFAULT_LIMITS, Date.now());
      await completeBuild(w, last.buildId, [], Date.now());
    }
    await settleProject(w, context.judge, project.id, last, Date.now());
  });
}
