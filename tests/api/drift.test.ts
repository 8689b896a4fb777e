import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { historyItem } from "../../shared/schemas/block.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import { climbingBlocks } from "../support/drifting.ts";
import { buildOf, commitOf, shaOf } from "../support/hull.ts";
import { openRecord } from "../support/record.ts";
import type { TestRecord } from "../support/record.ts";
import { loadEntryHistory } from "../../server/features/history/loadEntryHistory.ts";
import { loadEntrySeries } from "../../server/features/history/loadEntrySeries.ts";
import { mulberry32, shuffled } from "../support/random.ts";
import { unpackEntries } from "../../server/record/entryList.ts";

let record: TestRecord;
beforeEach(async () => {
  record = await openRecord();
});
afterEach(() => record.dispose());

const BUILDS = 45;
const FROM = 25;
const story = () => climbingBlocks(BUILDS, FROM, 0.1).map((block, at) => buildOf(commitOf(at + 1), [block]));

/** What was told, by commit: the record without ids. */
async function happenings() {
  const rows = await record.context.db.select<{
    sha: string;
    onset: string;
    kind: string;
    entries: Buffer;
    decades: number;
  }>(
    `SELECT c.sha, oc.sha AS onset, e.kind, e.entries, e.decades FROM drift_events e
     JOIN builds b ON b.id = e.buildId JOIN commits c ON c.id = b.commitId
     JOIN builds o ON o.id = e.onsetBuildId JOIN commits oc ON oc.id = o.commitId ORDER BY c.sha, e.kind`,
  );
  return rows.map(({ entries, ...row }) => ({ ...row, entries: [...unpackEntries(entries)] }));
}

async function states() {
  const rows = await record.context.db.select<{ repeats: number; quiet: number; state: Buffer | null; hash: string }>(
    `SELECT d.repeats, d.quiet, d.state, hex(s.hash) AS hash FROM block_drifts d JOIN snapshots s ON s.id = d.lastSnapshotId`,
  );
  return rows;
}

const ofEntry = (told: Awaited<ReturnType<typeof happenings>>, entry: number) =>
  told.filter(({ entries }) => entries.includes(entry)).map(({ sha, kind }) => ({ sha, kind }));

/** What the definition says of one entry over its whole history, beside the running state of its block. */
async function seriesEvents(row: number, column: number) {
  const place = { projectId: record.project.id, laneId: 1, blockId: 1, row, column };
  const { builds, drift } = await loadEntrySeries(record.context.db, place);
  return builds.flatMap(({ buildId, sha }) => {
    const kind = drift.get(buildId)?.event;
    return kind ? [{ sha, kind }] : [];
  });
}

const historyOf = (row: number, column: number) =>
  loadEntryHistory(record.context.db, {
    projectId: record.project.id,
    laneId: 1,
    blockId: 1,
    row,
    column,
    branch: null,
    limit: 5000,
  });

describe("drift along a lane", () => {
  it("tells a slow climb of one entry, where it began, and nothing of the others", async () => {
    for (const build of story()) await record.post(build);
    const told = await happenings();
    expect(told).toMatchObject([{ kind: "climb", entries: [2] }]);
    const place = (sha: string) => Number.parseInt(sha, 16) - 1;
    expect(place(told[0]?.sha ?? "")).toBeLessThanOrEqual(FROM + 13);
    expect(place(told[0]?.onset ?? "")).toBeGreaterThanOrEqual(FROM - 1);
    expect(place(told[0]?.onset ?? "")).toBeLessThanOrEqual(FROM + 6);
    const history = await historyOf(1, 0);
    for (const item of history) historyItem.parse(item);
    expect(history.filter((item) => item.event !== null)).toMatchObject([{ commit: told[0]?.sha, event: "climb" }]);
    expect(history.at(-1)?.drift?.decades).toBeGreaterThan(1.5);
    expect((await historyOf(0, 0)).at(-1)?.drift?.decades).toBeLessThan(0.7);
    expect(history[0]?.drift).toBeNull();
  });

  it("is the same in whatever order the builds come, to the last bit", async () => {
    for (const build of story()) await record.post(build);
    const told = await happenings();
    const kept = await states();
    for (const seed of [1, 2, 3]) {
      await record.dispose();
      record = await openRecord();
      for (const build of shuffled(mulberry32(seed), story())) await record.post(build);
      expect(await happenings(), `order ${seed}`).toEqual(told);
      expect(await seriesEvents(1, 0), `order ${seed}`).toEqual(ofEntry(told, 2));
      expect((await states()).map(({ hash }) => hash)).toEqual(kept.map(({ hash }) => hash));
    }
  });

  it("costs one count where a build repeats the numbers of the one before", async () => {
    const [block] = climbingBlocks(1, 99, 0);
    const build = (n: number): BuildDocument => buildOf(commitOf(n), [block as BuildDocument["blocks"][number]]);
    for (let n = 1; n <= 12; n += 1) await record.post(build(n));
    expect(await states()).toMatchObject([{ repeats: 11, quiet: 1, state: null }]);
  });

  it("is that of the builds one by one where repeats lie between changes", async () => {
    const blocks = climbingBlocks(40, 20, 0.15, { noise: 0.05 });
    const builds = blocks.map((_, at) =>
      buildOf(commitOf(at + 1), [blocks[at - (at % 3)] as BuildDocument["blocks"][number]]),
    );
    for (const build of builds) await record.post(build);
    const told = ofEntry(await happenings(), 2);
    expect(told.length).toBeGreaterThan(0);
    expect(await seriesEvents(1, 0)).toEqual(told);
  });

  it("is kept in parts: one entry of a large block that jumps is told by its place in the whole", async () => {
    const [rows, columns, jumping] = [300, 300, 80_123];
    const wide = (n: number): BuildDocument => {
      const reference = Float64Array.from({ length: rows * columns }, (_, k) => 2 + Math.sin(k));
      const derivative = reference.map((value, k) => value * (1 + (k === jumping && n === 8 ? 1e-7 : 1e-10)));
      const f64le = (values: Float64Array) => ({ f64le: Buffer.from(values.buffer).toString("base64") });
      return buildOf(commitOf(n), [
        {
          model: "wake.deficit",
          output: { name: "f", size: rows },
          input: { name: "x", size: columns },
          derivative: { method: "analytic", values: f64le(derivative) },
          references: [{ method: "complex-step", step: 1e-20, values: f64le(reference) }],
        },
      ]);
    };
    for (let n = 1; n <= 8; n += 1) await record.post(wide(n));
    expect(await happenings()).toMatchObject([{ sha: shaOf(8), kind: "jump", entries: [jumping] }]);
    // The other part repeats its numbers: nothing of it had to be written.
    expect((await states()).map(({ repeats, state }) => [repeats, state === null])).toEqual([
      [7, true],
      [0, false],
    ]);
  });

  it("follows the default branch alone", async () => {
    const blocks = climbingBlocks(30, 10, 0.2);
    for (const [at, block] of blocks.entries()) {
      const branch = at < 10 ? "main" : "feature";
      await record.post(buildOf(commitOf(at + 1, at === 0 ? [] : [at], branch), [block]));
    }
    expect(await happenings()).toEqual([]);
    // Merged, the branch is part of the default branch.
    await record.post(buildOf(commitOf(31, [10, 30]), [blocks[29] as BuildDocument["blocks"][number]]));
    expect(await happenings()).toMatchObject([{ kind: "climb", entries: [2] }]);
    expect((await happenings())[0]?.sha).not.toBe(shaOf(31));
  });
});
