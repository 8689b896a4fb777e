import { spawn } from "node:child_process";
import { once } from "node:events";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { QueryTypes } from "sequelize";
import { expect, it } from "vitest";
import { connect } from "../../server/db/connection.ts";
import { openDatabase } from "../../server/db/database.ts";
import { loadPlane, loadSnapshots } from "../../server/record/readPlanes.ts";
import { numbers, shaOf } from "../support/hull.ts";
import { integerBetween, mulberry32 } from "../support/random.ts";

const KILLS = 10;
const CHILD = fileURLToPath(new URL("../support/postForever.ts", import.meta.url));

/** Lets a process post from commit `first` on and kills it; answers with the commits that it acknowledged. */
async function postUntilKilled(folder: string, first: number, random: () => number): Promise<number[]> {
  const child = spawn(process.execPath, ["--import", "tsx", CHILD, folder, String(first)], {
    stdio: ["ignore", "pipe", "inherit"],
  });
  const ended = once(child, "exit");
  const acknowledgements = integerBetween(random, 1, 4);
  let told = "";
  for await (const chunk of child.stdout) {
    told += String(chunk);
    if (told.split("\n").length <= acknowledgements || child.killed) continue;
    // Somewhere within the next posting: in the worker, in the transaction, or just after it.
    await new Promise((resolve) => setTimeout(resolve, integerBetween(random, 0, 60)));
    child.kill("SIGKILL");
  }
  expect((await ended)[1]).toBe("SIGKILL");
  // A line that was cut off was not written whole, hence not acknowledged.
  return told.split("\n").slice(0, -1).map(Number);
}

async function isSound(file: string): Promise<void> {
  const sequelize = await connect(file);
  const check = (pragma: string) => sequelize.query(`PRAGMA ${pragma}`, { type: QueryTypes.SELECT });
  expect(await check("integrity_check")).toEqual([{ integrity_check: "ok" }]);
  expect(await check("foreign_key_check")).toEqual([]);
  await sequelize.close();
}

it(`keeps every posting that it acknowledged, and no half of another, through ${KILLS} kills`, async () => {
  const folder = await mkdtemp(join(tmpdir(), "clinograph-killed-"));
  const file = join(folder, "clinograph.sqlite");
  const random = mulberry32(20261201);
  const acknowledged: number[] = [];
  for (let kill = 0; kill < KILLS; kill++) {
    const first = (acknowledged.at(-1) ?? 0) + 1;
    acknowledged.push(...(await postUntilKilled(folder, first, random)));
    await isSound(file);
  }
  expect(acknowledged.length).toBeGreaterThanOrEqual(KILLS);
  expect(new Set(acknowledged).size).toBe(acknowledged.length);

  const db = await openDatabase(file);
  const builds = await db.select<{ id: number; sha: string; state: string; summary: string; answers: number }>(
    `SELECT b.id, c.sha, b.state, b.summary,
       (SELECT count(*) FROM shards s WHERE s.buildId = b.id AND s.answer IS NOT NULL) AS answers
     FROM builds b JOIN commits c ON c.id = b.commitId`,
  );
  const shas = new Set(builds.map(({ sha }) => sha));
  for (const n of acknowledged) expect(shas).toContain(shaOf(n));
  for (const { id, sha, state, answers } of builds) {
    expect({ state, answers }).toEqual({ state: "complete", answers: 1 });
    const rows = await db.select<{ snapshotId: number }>("SELECT snapshotId FROM build_blocks WHERE buildId = $1", [
      id,
    ]);
    expect(rows).toHaveLength(2);
    const expected = Float64Array.from(numbers(40, 40, Number.parseInt(sha, 16)).flat());
    for (const { planes } of (
      await loadSnapshots(
        db,
        rows.map((row) => row.snapshotId),
      )
    ).values()) {
      const reference = Buffer.from(await loadPlane(db, planes, "reference", 1600));
      expect(reference.equals(Buffer.from(expected.buffer))).toBe(true);
    }
  }
  await db.close();
  await rm(folder, { recursive: true, force: true });
}, 400_000);
