import { jacobianKey } from "../../shared/domain/selector.ts";
import type { Writer } from "../db/write.ts";
import type { JudgedPosting } from "../ingest/judgePosting.ts";
import { storeSummary } from "./buildSummary.ts";
import { RecordConflict } from "./conflict.ts";
import { findLane } from "./laneBuilds.ts";
import { storeBlocks } from "./storeBlocks.ts";
import { storeCommits } from "./storeCommits.ts";

export interface StoredPosting {
  readonly laneId: number;
  readonly buildId: number;
  readonly shardId: number;
  /** True where all shards are here and the build is still to be completed. */
  readonly allHere: boolean;
  /** The answer given before, where this body came before; null where that posting was never answered. */
  readonly repeated: { readonly answer: Buffer | null } | null;
}

interface BuildRow {
  readonly id: number;
  readonly state: "receiving" | "complete";
  readonly shardCount: number;
}

/**
 * Puts a judged posting into the record, in the caller's transaction. The key of a posting is (project, lane, commit,
 * run, shard): the same body again changes nothing, another one is refused.
 * @throws RecordConflict
 */
export async function storePosting(
  w: Writer,
  projectId: number,
  posting: JudgedPosting,
  limits: { readonly entries: number; readonly blocks: number },
  now: number,
): Promise<StoredPosting> {
  const { header } = posting;
  const laneId = await ensureLane(w, projectId, header.lane);
  const position = header.shard?.index ?? 0;
  const known = await findBuild(w, laneId, header.commit.sha, projectId, header.run.id);
  const repeated = known && (await findShard(w, known.id, position, posting));
  if (known && repeated) {
    return {
      laneId,
      buildId: known.id,
      shardId: repeated.id,
      allHere: false,
      repeated: { answer: repeated.answer },
    };
  }
  await storeCommits(w, projectId, [...header.history, header.commit]);
  const build = known ?? (await createBuild(w, projectId, laneId, posting, now));
  refuseLateShard(build, posting);
  await refuseTooLarge(w, build.id, posting, limits);
  await storeBlocks(w, projectId, build.id, posting.blocks, posting.tiles);
  const shardId = await createShard(w, build.id, position, posting, now);
  const [{ n }] = await w.select<{ n: number }>("SELECT count(*) AS n FROM shards WHERE buildId = $1", [build.id]);
  return { laneId, buildId: build.id, shardId, allHere: n === build.shardCount, repeated: null };
}

/** Marks a build as whole, `missing` shards aside, and sums it up. */
export async function completeBuild(
  w: Writer,
  buildId: number,
  missing: readonly number[],
  now: number,
): Promise<void> {
  await w.run("UPDATE builds SET state = 'complete', completedAt = $2, missingShards = $3 WHERE id = $1", [
    buildId,
    now,
    JSON.stringify(missing),
  ]);
  await storeSummary(w, buildId);
}

/** Looked for first: an insert that is passed over takes a number of the sequence all the same. */
async function ensureLane(w: Writer, projectId: number, name: string): Promise<number> {
  const known = await findLane(w, projectId, name);
  if (known !== null) return known;
  await w.run("INSERT INTO lanes (projectId, name) VALUES ($1, $2)", [projectId, name]);
  return (await findLane(w, projectId, name)) as number;
}

async function findBuild(
  w: Writer,
  laneId: number,
  sha: string,
  projectId: number,
  runId: string,
): Promise<BuildRow | null> {
  const [build] = await w.select<BuildRow>(
    `SELECT b.id, b.state, b.shardCount FROM builds b JOIN commits c ON c.id = b.commitId
     WHERE b.laneId = $1 AND c.projectId = $2 AND c.sha = $3 AND b.runId = $4`,
    [laneId, projectId, sha, runId],
  );
  return build ?? null;
}

async function findShard(
  w: Writer,
  buildId: number,
  position: number,
  posting: JudgedPosting,
): Promise<{ id: number; answer: Buffer | null } | null> {
  const [shard] = await w.select<{ id: number; bodyHash: Buffer; answer: Buffer | null }>(
    "SELECT id, bodyHash, answer FROM shards WHERE buildId = $1 AND position = $2",
    [buildId, position],
  );
  if (shard === undefined) return null;
  if (shard.bodyHash.equals(posting.bodyHash)) return shard;
  const { run, commit, shard: told } = posting.header;
  const which = told ? `shard ${told.index} of run ${run.id}` : `run ${run.id}`;
  throw new RecordConflict(
    "conflict",
    `Another body was posted for ${which} of commit ${commit.sha.slice(0, 12)} already. A new run needs its own run.id.`,
  );
}

async function createBuild(
  w: Writer,
  projectId: number,
  laneId: number,
  posting: JudgedPosting,
  now: number,
): Promise<BuildRow> {
  const { run, commit, shard } = posting.header;
  const time = (text: string | undefined) => (text === undefined ? null : Date.parse(text));
  await w.run(
    `INSERT INTO builds (projectId, laneId, commitId, runId, runUrl, startedAt, finishedAt, state, shardCount, createdAt)
     SELECT $1, $2, id, $4, $5, $6, $7, 'receiving', $8, $9 FROM commits WHERE projectId = $1 AND sha = $3`,
    [
      projectId,
      laneId,
      commit.sha,
      run.id,
      run.url ?? null,
      time(run.startedAt),
      time(run.finishedAt),
      shard?.count ?? 1,
      now,
    ],
  );
  return (await findBuild(w, laneId, commit.sha, projectId, run.id)) as BuildRow;
}

function refuseLateShard(build: BuildRow, posting: JudgedPosting): void {
  const { run, shard } = posting.header;
  const count = shard?.count ?? 1;
  if (build.shardCount !== count) {
    throw new RecordConflict("conflict", `Run ${run.id} was begun with ${build.shardCount} shards, not ${count}.`);
  }
  if (build.state === "complete") {
    throw new RecordConflict("conflict", `Run ${run.id} was closed without shard ${shard?.index ?? 0}.`);
  }
}

async function refuseTooLarge(
  w: Writer,
  buildId: number,
  posting: JudgedPosting,
  limits: { readonly entries: number; readonly blocks: number },
): Promise<void> {
  const [before] = await w.select<{ entries: number; blocks: number; probes: number }>(
    `SELECT COALESCE(sum(s.rowCount * s.columnCount), 0) AS entries,
       count(DISTINCT json_array(b.model, b.point, b.output, b.input)) AS blocks, count(nullif(b.probe, '')) AS probes
     FROM build_blocks bb JOIN snapshots s ON s.id = bb.snapshotId JOIN blocks b ON b.id = bb.blockId
     WHERE bb.buildId = $1`,
    [buildId],
  );
  const entries = posting.blocks.reduce((sum, { snapshot }) => sum + snapshot.rows * snapshot.columns, before.entries);
  const blocks = before.blocks + new Set(posting.blocks.map(jacobianKey)).size;
  const probes = before.probes + posting.blocks.filter(({ probe }) => probe !== "").length;
  if (entries > limits.entries) {
    throw new RecordConflict("too-large", `The build has ${entries} entries, at most ${limits.entries} are taken.`);
  }
  for (const [count, what] of [[blocks, "blocks"] as const, [probes, "probes"] as const]) {
    if (count <= limits.blocks) continue;
    throw new RecordConflict("too-large", `The build has ${count} ${what}, at most ${limits.blocks} are taken.`);
  }
}

async function createShard(
  w: Writer,
  buildId: number,
  position: number,
  posting: JudgedPosting,
  now: number,
): Promise<number> {
  await w.run("INSERT INTO shards (buildId, position, bodyHash, bytes, receivedAt) VALUES ($1, $2, $3, $4, $5)", [
    buildId,
    position,
    Buffer.from(posting.bodyHash),
    posting.bytes,
    now,
  ]);
  const [shard] = await w.select<{ id: number }>("SELECT id FROM shards WHERE buildId = $1 AND position = $2", [
    buildId,
    position,
  ]);
  return shard.id;
}
