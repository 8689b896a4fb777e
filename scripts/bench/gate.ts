import { loadGate } from "../../server/features/gate/loadGate.ts";
import { judgePosting } from "../../server/ingest/judgePosting.ts";
import type { JudgedPosting } from "../../server/ingest/judgePosting.ts";
import { completeBuild, storePosting } from "../../server/record/storePosting.ts";
import { settleProject } from "../../server/trace/settleProject.ts";
import { DEFAULT_LIMITS } from "../../shared/domain/limits.ts";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { DEFAULT_GATE_POLICY } from "../../shared/domain/vocabulary.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import { openRecord } from "../../tests/support/record.ts";
import type { TestRecord } from "../../tests/support/record.ts";
import { line, makeBuild, median, shaOf } from "./scenario.ts";

const BUILDS = 1000;
const SHAPE = { blocks: 500, rows: 4, columns: 4 };
const GOAL_MS = 20;

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

/** How long the gate of a commit takes with 500 blocks and 1,000 builds of history; the last commit breaks a block. */
export async function run(): Promise<void> {
  const record = await openRecord();
  const template = judged(makeBuild(1, SHAPE, 7));
  const postings = Array.from({ length: BUILDS - 1 }, (_, at): JudgedPosting => {
    const { commit, run: ci } = makeBuild(at + 1, { ...SHAPE, blocks: 0 }, 7);
    return { ...template, header: { ...template.header, commit, run: ci } };
  });
  await storeBuilds(record, postings);
  const broken = makeBuild(BUILDS, SHAPE, 7);
  const [block] = broken.blocks;
  (block?.derivative.values as number[][])[1][2] = 100;
  await record.post(broken);
  const question = {
    project: { id: record.project.id, policy: DEFAULT_GATE_POLICY },
    lane: "default",
    commit: shaOf(BUILDS),
    base: null,
  };
  const times: number[] = [];
  for (let k = 0; k < 21; k += 1) {
    const start = performance.now();
    const answer = await loadGate(record.context.db, question, Date.now());
    times.push(performance.now() - start);
    if (answer.decision !== "fail") throw new Error(`the gate said ${answer.decision}`);
  }
  console.log(`gate: ${SHAPE.blocks} blocks, ${BUILDS} builds of history`);
  line("median of 21", median(times), "ms", GOAL_MS);
  await record.dispose();
}
