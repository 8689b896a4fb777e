import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { completePending } from "../../server/features/builds/complete.ts";
import { Conflict, Invalid, PayloadTooLarge } from "../../server/http/problem.ts";
import { RejectedPosting } from "../../server/ingest/rejection.ts";
import { postedBuild } from "../../shared/schemas/build.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import { blockOf, buildOf, commitOf, flipped, shaOf, TENSION, THRUST } from "../support/hull.ts";
import { openRecord } from "../support/record.ts";
import type { TestRecord } from "../support/record.ts";

let record: TestRecord;
beforeEach(async () => {
  record = await openRecord({ CLINOGRAPH_MAX_ENTRIES: "40" });
});
afterEach(() => record.dispose());

const thrust = blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST });
const wrongThrust = blockOf({ model: "rotor.thrust", derivative: flipped(THRUST, [[0, 0]]), reference: THRUST });
const tension = blockOf({ model: "mooring.tension", derivative: TENSION, reference: TENSION });

async function tableNames(): Promise<string[]> {
  const rows = await record.context.db.select<{ name: string }>(
    "SELECT name FROM sqlite_master WHERE type = 'table' ORDER BY name",
  );
  return rows.map(({ name }) => name);
}

/** Every row of every table, BLOBs as they are. */
async function everything(): Promise<Record<string, object[]>> {
  const tables: Record<string, object[]> = {};
  for (const name of await tableNames()) tables[name] = await record.context.db.select(`SELECT * FROM "${name}"`);
  return tables;
}

async function sizes(): Promise<Record<string, number>> {
  return Object.fromEntries(Object.entries(await everything()).map(([name, rows]) => [name, rows.length]));
}

const shard = (index: number, count: number, blocks: BuildDocument["blocks"], run = "sharded") =>
  buildOf(commitOf(1), blocks, { run: { id: run }, shard: { index, count } });

describe("a posting that is sent again", () => {
  it("is answered as before, and adds nothing, whatever happened meanwhile", async () => {
    const document = buildOf(commitOf(1), [thrust]);
    const first = await record.post(document);
    await record.post(buildOf(commitOf(2), [wrongThrust, tension]));
    const before = await everything();
    expect(await record.post(document)).toEqual({ answer: first.answer, repeated: true });
    expect(await record.post(document, "dry-run")).toEqual({ answer: first.answer, repeated: true });
    expect(await everything()).toEqual(before);
    expect(first.repeated).toBe(false);
  });

  it("is the same however it was compressed, and another one if a byte differs", async () => {
    const { gzipSync } = await import("node:zlib");
    const bytes = Buffer.from(JSON.stringify(buildOf(commitOf(1), [thrust])));
    const { answer } = await record.postBytes(bytes);
    expect(await record.postBytes(gzipSync(bytes), "gzip")).toEqual({ answer, repeated: true });
    const before = await everything();
    await expect(record.postBytes(Buffer.concat([bytes, Buffer.from(" ")]))).rejects.toThrow(Conflict);
    await expect(record.post(buildOf(commitOf(1), [tension]))).rejects.toThrow(/own run\.id/);
    expect(await everything()).toEqual(before);
  });

  it("at the same moment is one posting", async () => {
    const document = buildOf(commitOf(1), [thrust]);
    const answers = await Promise.all(Array.from({ length: 5 }, () => record.post(document)));
    expect(answers.filter(({ repeated }) => !repeated)).toHaveLength(1);
    expect(new Set(answers.map(({ answer }) => JSON.stringify(answer))).size).toBe(1);
    expect(await sizes()).toMatchObject({ builds: 1, shards: 1, build_blocks: 1 });
  });

  it("as another run is a new build, and the one that finished last speaks", async () => {
    const at = (second: number) => ({ finishedAt: new Date(Date.UTC(2026, 3, 1, 0, 0, second)).toISOString() });
    await record.post(buildOf(commitOf(1), [thrust]));
    const bad = await record.post(buildOf(commitOf(2), [wrongThrust], { run: { id: "a", ...at(1) } }));
    expect(bad.answer.gate.decision).toBe("fail");
    const good = await record.post(buildOf(commitOf(2), [thrust], { run: { id: "b", ...at(3) } }));
    expect(good.answer.gate.decision).toBe("pass");
    expect(good.answer.build.id).not.toBe(bad.answer.build.id);
    // A run that finished before the speaking one, and comes after it, changes nothing.
    const late = await record.post(buildOf(commitOf(2), [wrongThrust], { run: { id: "c", ...at(2) } }));
    expect(late.answer.gate.decision).toBe("pass");
    expect(await record.context.db.select("SELECT 1 FROM breaks WHERE withdrawnAt IS NULL")).toEqual([]);
  });

  it("in another lane is another build", async () => {
    const one = await record.post(buildOf(commitOf(1), [thrust], { lane: "gcc" }));
    const other = await record.post(buildOf(commitOf(1), [thrust], { lane: "clang" }));
    expect(other.repeated).toBe(false);
    expect(other.answer.build).toMatchObject({ lane: "clang" });
    expect(other.answer.build.id).not.toBe(one.answer.build.id);
  });
});

describe("a posting that is refused", () => {
  it("leaves nothing", async () => {
    const before = await everything();
    const spoilt = { ...thrust, derivative: { method: "analytic" as const, values: [[1]] } };
    await expect(record.post(buildOf(commitOf(1), [thrust, spoilt]))).rejects.toThrow(RejectedPosting);
    const circle = { history: [commitOf(5, [6]), commitOf(6, [5])] };
    await expect(record.post(buildOf(commitOf(1), [thrust], circle))).rejects.toThrow(Invalid);
    await expect(record.post(buildOf(commitOf(1, [1]), [thrust]))).rejects.toThrow(Invalid);
    await expect(record.postBytes(Buffer.from("{"))).rejects.toThrow(RejectedPosting);
    expect(await everything()).toEqual(before);
    expect((await record.post(buildOf(commitOf(1), [thrust]))).repeated).toBe(false);
  });

  it("for its parents leaves the commits as they were", async () => {
    await record.post(buildOf(commitOf(3, [2]), [thrust]));
    const before = await everything();
    await expect(record.post(buildOf(commitOf(3, [1]), [thrust], { run: { id: "x" } }))).rejects.toThrow(Conflict);
    await expect(record.tell([commitOf(9), commitOf(3, [2, 1])])).rejects.toThrow(Conflict);
    // Commit 2 is known by name only: it may still be told of, but not as a child of its own child.
    await expect(record.tell([commitOf(2, [3])])).rejects.toThrow(Invalid);
    expect(await everything()).toEqual(before);
  });
});

describe("a dry run", () => {
  it("answers what the posting itself would, and leaves every table as it was", async () => {
    await record.post(buildOf(commitOf(1), [thrust]));
    const document = buildOf(commitOf(2), [wrongThrust, tension], { history: [commitOf(7, [])], lane: "default" });
    const before = await everything();
    const dry = await record.post(document, "dry-run");
    expect(await everything()).toEqual(before);
    expect(dry.repeated).toBe(false);
    expect(postedBuild.parse(dry.answer)).toMatchObject({
      build: { state: "complete" },
      gate: { decision: "fail" },
      summary: { blocks: 2, entries: 10, disagrees: 1 },
    });
    expect(dry.answer.breaks).toHaveLength(1);
    const real = await record.post(document);
    expect(real).toEqual(dry);
  });

  it("in a new lane leaves no lane", async () => {
    const dry = await record.post(buildOf(commitOf(1), [thrust], { lane: "new" }), "dry-run");
    expect(dry.answer.build.lane).toBe("new");
    expect(await record.context.db.select("SELECT 1 FROM lanes")).toEqual([]);
  });
});

describe("shards", () => {
  it("come in any order, and are judged when the last one is there", async () => {
    await record.post(buildOf(commitOf(1, []), [thrust, tension], { lane: "default", run: { id: "before" } }));
    const on2 = (index: number, blocks: BuildDocument["blocks"]) =>
      buildOf(commitOf(2), blocks, { run: { id: "s" }, shard: { index, count: 3 } });
    const last = await record.post(on2(2, [tension]));
    expect(last.answer).toMatchObject({
      build: { state: "receiving" },
      summary: { blocks: 1, entries: 4 },
      gate: { decision: "wait", reasons: [] },
      breaks: [],
    });
    expect((await record.post(on2(0, []))).answer.build.state).toBe("receiving");
    const whole = await record.post(on2(1, [wrongThrust]));
    expect(whole.answer).toMatchObject({
      build: { id: last.answer.build.id, state: "complete" },
      summary: { blocks: 2, entries: 10, disagrees: 1 },
      gate: { decision: "fail", base: shaOf(1) },
    });
    expect(whole.answer.breaks).toHaveLength(1);
    // An early shard that is sent again is answered as it was then.
    expect(await record.post(on2(2, [tension]))).toEqual({ answer: last.answer, repeated: true });
  });

  it("that never come are recorded when the build is closed; one that comes after is refused", async () => {
    const { answer } = await record.post(shard(1, 4, [thrust]));
    const id = Number(answer.build.id);
    const closed = await record.close(id);
    expect(closed.build.state).toBe("complete");
    expect(closed.summary.blocks).toBe(1);
    expect(await record.context.db.select("SELECT missingShards FROM builds")).toEqual([{ missingShards: "[0,2,3]" }]);
    const before = await everything();
    expect(await record.close(id)).toEqual(closed);
    await expect(record.post(shard(0, 4, [tension]))).rejects.toThrow(/closed without shard 0/);
    expect((await record.post(shard(1, 4, [thrust]))).repeated).toBe(true);
    expect(await everything()).toEqual(before);
    await expect(record.close(id + 1)).rejects.toThrow();
  });

  it("hold each block once, and as many entries together as one posting may", async () => {
    await record.post(shard(0, 9, [thrust]));
    const before = await everything();
    await expect(record.post(shard(1, 9, [tension, thrust]))).rejects.toMatchObject({
      members: { errors: [{ pointer: "#/blocks/1" }] },
    });
    const many = Array.from({ length: 6 }, (_, at) =>
      blockOf({ model: `m${at}`, derivative: THRUST, reference: THRUST }),
    );
    await expect(record.post(shard(1, 9, many))).rejects.toThrow(PayloadTooLarge);
    await expect(record.post(shard(1, 9, many))).rejects.toThrow("The build has 42 entries, at most 40 are taken.");
    expect(await everything()).toEqual(before);
    expect((await record.post(shard(1, 9, many.slice(1)))).answer.summary.entries).toBe(36);
  });

  it("agree on how many they are", async () => {
    await record.post(shard(0, 2, [thrust]));
    await expect(record.post(shard(1, 3, [tension]))).rejects.toThrow(/begun with 2 shards, not 3/);
    await expect(record.post(buildOf(commitOf(1), [tension], { run: { id: "sharded" } }))).rejects.toThrow(Conflict);
  });
});

describe("a posting that is to be judged later", () => {
  it("is safe at once, and is completed like any other", async () => {
    await record.post(buildOf(commitOf(1), [thrust]));
    const document = buildOf(commitOf(2), [wrongThrust]);
    const later = await record.post(document, "respond-async");
    expect(later.answer).toMatchObject({ build: { state: "receiving" }, gate: { decision: "wait" } });
    expect(await completePending(record.context)).toBe(1);
    expect(await completePending(record.context)).toBe(0);
    expect(await record.context.db.select("SELECT state, missingShards FROM builds WHERE id = 2")).toEqual([
      { state: "complete", missingShards: "[]" },
    ]);
    expect(await record.context.db.select("SELECT onset FROM breaks")).toEqual([{ onset: shaOf(2) }]);
    expect((await record.post(document)).repeated).toBe(true);
  });

  it("is completed when the server comes back after all of its shards came, and not before", async () => {
    await record.post(shard(0, 2, [thrust]), "respond-async");
    expect(await completePending(record.context)).toBe(0);
    await record.post(shard(1, 2, [tension]), "respond-async");
    expect(await completePending(record.context)).toBe(1);
    expect(await record.context.db.select("SELECT state FROM builds")).toEqual([{ state: "complete" }]);
  });
});

describe("a build that changes nothing", () => {
  it("adds one small row for each block, and no numbers", async () => {
    await record.post(buildOf(commitOf(1), [thrust, tension]));
    await record.post(buildOf(commitOf(2), [thrust, tension]));
    const before = await sizes();
    await record.post(buildOf(commitOf(3), [thrust, tension]));
    const grown = Object.entries(await sizes())
      .map(([name, rows]) => [name, rows - (before[name] ?? 0)] as const)
      .filter(([, more]) => more !== 0);
    expect(Object.fromEntries(grown)).toEqual({
      commits: 1,
      commit_parents: 1,
      commit_branches: 1,
      builds: 1,
      shards: 1,
      build_blocks: 2,
    });
  });
});

describe("commits", () => {
  const known = (n: number) =>
    record.context.db.select<Record<string, unknown>>(
      "SELECT subject, authorName, committedAt, changedPaths FROM commits WHERE sha = $1",
      [shaOf(n)],
    );
  const suspects = async () => {
    const rows = await record.context.db.select<{ trace: string }>(
      "SELECT trace FROM breaks WHERE withdrawnAt IS NULL",
    );
    return rows.map(({ trace }) =>
      (JSON.parse(trace) as { suspects: { sha: string }[] }).suspects.map(({ sha }) => sha).toSorted(),
    );
  };

  it("keep what is left out of them, and take what is told anew", async () => {
    await record.post(buildOf(commitOf(2), [thrust]));
    const [before] = await known(2);
    expect(await record.tell([{ sha: shaOf(2) }, { sha: shaOf(3), parents: [shaOf(2)] }])).toEqual({
      known: 2,
      added: 1,
    });
    expect(await known(2)).toEqual([before]);
    await record.tell([{ sha: shaOf(2), parents: [], subject: "Told better" }]);
    expect(await known(2)).toEqual([{ ...before, subject: "Told better" }]);
    const parents = await record.context.db.select("SELECT parentSha FROM commit_parents ORDER BY parentSha");
    expect(parents).toEqual([{ parentSha: shaOf(1) }, { parentSha: shaOf(2) }]);
  });

  it("told of late are suspects as if they had been told in time", async () => {
    await record.post(buildOf(commitOf(1), [thrust]));
    await record.post(buildOf(commitOf(4), [wrongThrust]));
    expect(await suspects()).toEqual([[shaOf(4)]]);
    await record.tell([commitOf(3), commitOf(2)]);
    expect(await suspects()).toEqual([[2, 3, 4].map(shaOf)]);
    expect(await record.tell([commitOf(3), commitOf(2)])).toEqual({ known: 4, added: 0 });
  });

  it("told of with a build are suspects in every lane", async () => {
    await record.post(buildOf(commitOf(1), [thrust], { lane: "gcc" }));
    await record.post(buildOf(commitOf(4), [wrongThrust], { lane: "gcc" }));
    await record.post(buildOf(commitOf(4), [thrust], { lane: "clang", history: [commitOf(3), commitOf(2)] }));
    expect(await suspects()).toEqual([[2, 3, 4].map(shaOf)]);
  });
});
