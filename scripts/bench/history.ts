import { loadEntryHistory } from "../../server/features/history/loadEntryHistory.ts";
import type { JudgedPosting } from "../../server/ingest/judgePosting.ts";
import { openRecord } from "../../tests/support/record.ts";
import { judged, storeBuilds } from "./record.ts";
import { line, makeBuild, median } from "./scenario.ts";

const BUILDS = 1000;
const SNAPSHOTS = 100;
const SHAPE = { blocks: 1, rows: 200, columns: 200 };
const GOAL_MS = 50;

/** How long the history of one entry takes over 1,000 builds of a block with 100 distinct snapshots. */
export async function run(): Promise<void> {
  const record = await openRecord();
  const templates = Array.from({ length: SNAPSHOTS }, (_, at) => judged(makeBuild(1, SHAPE, 1 + at)));
  const postings = Array.from({ length: BUILDS }, (_, at): JudgedPosting => {
    const { commit, run: ci } = makeBuild(at + 1, { ...SHAPE, blocks: 0 }, 1);
    const template = templates[Math.floor((at * SNAPSHOTS) / BUILDS)] as JudgedPosting;
    return { ...template, header: { ...template.header, commit, run: ci } };
  });
  await storeBuilds(record, postings);
  const { context, project } = record;
  const [lane] = await context.db.select<{ id: number }>("SELECT id FROM lanes");
  const [block] = await context.db.select<{ id: number }>("SELECT id FROM blocks");
  const wanted = {
    projectId: project.id,
    laneId: lane?.id ?? 0,
    blockId: block?.id ?? 0,
    row: 120,
    column: 77,
    branch: null,
    limit: BUILDS,
  };
  const times: number[] = [];
  for (let k = 0; k < 21; k += 1) {
    const start = performance.now();
    const items = await loadEntryHistory(context.db, wanted);
    times.push(performance.now() - start);
    if (items.length !== BUILDS) throw new Error(`the history has ${items.length} items`);
    if (new Set(items.map((item) => item.derivative)).size !== SNAPSHOTS) throw new Error("snapshots were lost");
  }
  console.log(
    `history of one entry: ${BUILDS} builds, ${SNAPSHOTS} distinct snapshots of ${SHAPE.rows} x ${SHAPE.columns}`,
  );
  line("median of 21", median(times), "ms", GOAL_MS);
  await record.dispose();
}
