import { stat } from "node:fs/promises";
import { openRecord } from "../../tests/support/record.ts";
import type { TestRecord } from "../../tests/support/record.ts";
import { line, makeBuild } from "./scenario.ts";

const GOAL_BYTES = 1024;
const COMMITS = 10;

async function fileBytes({ context }: TestRecord): Promise<number> {
  await context.db.sequelize.query("PRAGMA wal_checkpoint(TRUNCATE)");
  return (await stat(context.config.databaseFile)).size;
}

/** How much a build of 1,000,000 entries adds to the database when nothing changed, for each block. */
export async function run(): Promise<void> {
  console.log(`growth: 1,000,000 entries posted for ${COMMITS} more commits, unchanged`);
  for (const shape of [
    { blocks: 100, rows: 100, columns: 100 },
    { blocks: 1, rows: 1000, columns: 1000 },
  ]) {
    const record = await openRecord();
    await record.post(makeBuild(1, shape, 7));
    await record.post(makeBuild(2, shape, 7));
    const before = await fileBytes(record);
    for (let k = 0; k < COMMITS; k += 1) await record.post(makeBuild(3 + k, shape, 7));
    const grown = (await fileBytes(record)) - before;
    const what = `${shape.blocks} blocks of ${shape.rows} x ${shape.columns}, database ${(before / 1e6).toFixed(1)} MB, growth a block and build`;
    line(what, grown / (COMMITS * shape.blocks), "bytes", GOAL_BYTES);
    await record.dispose();
  }
}
