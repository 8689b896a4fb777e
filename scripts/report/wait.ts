import { setTimeout as sleep } from "node:timers/promises";
import type { PostedBuild } from "../../shared/schemas/build.ts";
import type { Gate } from "../../shared/schemas/gate.ts";
import { notPosted } from "./exit.ts";
import type { Retrying } from "./http.ts";
import { readBreak, readBuild, readGate } from "./post.ts";
import type { Target } from "./post.ts";

const FIRST_PAUSE_MS = 500;
const LONGEST_PAUSE_MS = 10_000;

export const isUndecided = ({ build, gate }: PostedBuild): boolean =>
  build.state === "receiving" || gate.decision === "wait";

/**
 * Waits until a build is complete and its gate decided. The build is asked first: while it is receiving, the gate of
 * its commit may still speak for an earlier run.
 * @throws ReportError (not posted) when the time is over.
 */
export async function waitForGate(
  target: Target,
  posted: PostedBuild,
  seconds: number,
  retrying: Retrying,
): Promise<PostedBuild> {
  const until = Date.now() + seconds * 1000;
  const { id, commit, lane } = posted.build;
  for (let pause = FIRST_PAUSE_MS; ; pause = Math.min(LONGEST_PAUSE_MS, pause * 1.5)) {
    const build = await readBuild(target, id, retrying);
    if (build.state === "complete") {
      const gate = await readGate(target, commit, lane, retrying);
      if (gate.decision !== "wait") {
        const breaks = await breaksOf(target, gate, retrying);
        return { build: { ...posted.build, state: "complete" }, summary: build.summary, gate, breaks };
      }
    }
    if (Date.now() + pause > until) {
      const { missing } = build.shards;
      const why = missing.length > 0 ? ` Missing shards (from 1): ${missing.map((at) => at + 1).join(", ")}.` : "";
      throw notPosted(`No verdict after ${seconds} s of waiting.${why}\n${posted.build.url}`);
    }
    await sleep(pause);
  }
}

/** A shard's own answer came before there was a verdict: the breaks are those that the gate speaks of. */
async function breaksOf(target: Target, gate: Gate, retrying: Retrying): Promise<PostedBuild["breaks"]> {
  const ids = new Set(gate.reasons.map(({ breakId }) => breakId).filter((id) => id !== undefined));
  return Promise.all([...ids].map((id) => readBreak(target, id, retrying)));
}
