import { deflateRawSync, inflateRawSync } from "node:zlib";
import type { PostedBuild } from "../../../shared/schemas/build.ts";
import type { Context } from "../../context.ts";
import type { Project } from "../../db/models/Project.ts";
import type { Writer } from "../../db/write.ts";
import { Conflict, Invalid, PayloadTooLarge } from "../../http/problem.ts";
import type { RawContent } from "../../http/rawBody.ts";
import { collectGarbage } from "../../ingest/collectGarbage.ts";
import type { JudgedPosting } from "../../ingest/judgePosting.ts";
import { wholeCounts } from "../../record/buildSummary.ts";
import { RecordConflict } from "../../record/conflict.ts";
import { storePosting } from "../../record/storePosting.ts";
import { finishBuild } from "../../trace/finishBuild.ts";
import { toleranceRulesOf, tolerancesOf } from "../projects/settings.ts";
import { composeAnswer } from "./answer.ts";

/** `kept`: a dry run keeps nothing; `respond-async`: stored at once, judged against the lane afterwards (RFC 7240). */
export type PostingMode = "kept" | "dry-run" | "respond-async";

export interface Posted {
  readonly answer: PostedBuild;
  /** True where the same body came before. */
  readonly repeated: boolean;
}

/** Carries the answer of a dry run out of the transaction that is rolled back. */
class RolledBack extends Error {
  readonly posted: Posted;
  constructor(posted: Posted) {
    super("a dry run keeps nothing");
    this.posted = posted;
  }
}

/**
 * One posting from its bytes to its answer: decoded and judged in a worker, then stored, traced and answered in one
 * transaction, so that what is acknowledged is whole and what fails leaves nothing.
 */
export async function postBuild(
  context: Context,
  project: Project,
  body: RawContent,
  mode: PostingMode,
): Promise<Posted> {
  const { limits } = context.config;
  const judged = await context.judge.posting({
    body: body.bytes,
    encoding: body.encoding,
    limits,
    tolerances: tolerancesOf(project),
    rules: toleranceRulesOf(project),
  });
  try {
    return await context.db.write((w) => record(w, context, project, judged, mode));
  } catch (error) {
    if (error instanceof RolledBack) return error.posted;
    throw error instanceof RecordConflict ? problemOf(error) : error;
  } finally {
    // When the answer is on its way: the tiles that came from the worker.
    setImmediate(collectGarbage, judged.bytes);
  }
}

async function record(
  w: Writer,
  context: Context,
  project: Project,
  judged: JudgedPosting,
  mode: PostingMode,
): Promise<Posted> {
  const now = Date.now();
  const stored = await storePosting(w, project.id, judged, context.config.limits, now);
  const answered = stored.repeated?.answer;
  if (answered) return { answer: unpackAnswer(answered), repeated: true };
  if (stored.allHere && mode !== "respond-async") {
    await finishBuild(w, context.judge, { ...stored, projectId: project.id }, [], now);
  }
  const answer = await composeAnswer(w, project, stored.buildId, context.config.publicUrl, now);
  await w.run("UPDATE shards SET answer = $2 WHERE id = $1", [stored.shardId, packAnswer(answer)]);
  if (mode === "dry-run") throw new RolledBack({ answer, repeated: false });
  return { answer, repeated: stored.repeated !== null };
}

/** Deflated: half of what a build that changes nothing adds to the record would be its answer. */
function packAnswer(answer: PostedBuild): Buffer {
  return deflateRawSync(JSON.stringify(answer));
}

function unpackAnswer(packed: Buffer): PostedBuild {
  const answer = JSON.parse(inflateRawSync(packed).toString()) as PostedBuild;
  return { ...answer, summary: wholeCounts(answer.summary) };
}

/** What the record refuses, in the words of HTTP. */
export function problemOf(conflict: RecordConflict): Error {
  switch (conflict.kind) {
    case "conflict":
      return new Conflict(conflict.message);
    case "too-large":
      return new PayloadTooLarge(conflict.message);
    case "invalid":
      return new Invalid([{ pointer: conflict.pointer, detail: conflict.message }], 0);
  }
}
