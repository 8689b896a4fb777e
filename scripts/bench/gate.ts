import { loadGate } from "../../server/features/gate/loadGate.ts";
import type { JudgedPosting } from "../../server/ingest/judgePosting.ts";
import { DEFAULT_GATE_POLICY } from "../../shared/domain/vocabulary.ts";
import { openRecord } from "../../tests/support/record.ts";
import { judged, storeBuilds } from "./record.ts";
import { line, makeBuild, median, shaOf } from "./scenario.ts";

const BUILDS = 1000;
const SHAPE = { blocks: 500, rows: 4, columns: 4 };
const GOAL_MS = 20;

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
