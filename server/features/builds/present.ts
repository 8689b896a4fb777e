import type { BuildDetail, BuildRow } from "../../../shared/schemas/build.ts";
import { time, timeOrNull } from "../../http/present.ts";
import type { BuildSummary } from "../../record/buildSummary.ts";
import type { LoadedArrival, LoadedBuild } from "./loadBuilds.ts";
import type { Urls } from "./urls.ts";

/** `summary` is that of the record, or what a build that is still receiving has so far. */
export function presentBuild(build: LoadedBuild, summary: BuildSummary, urls: Urls): BuildRow {
  const id = String(build.id);
  const received = JSON.parse(build.received) as number[];
  const missing =
    build.state === "complete"
      ? (JSON.parse(build.missingShards) as number[])
      : Array.from({ length: build.shardCount }, (_, at) => at).filter((at) => !received.includes(at));
  return {
    id,
    url: urls.build(id),
    state: build.state,
    lane: build.lane,
    commit: build.sha,
    branch: build.branch,
    subject: build.subject,
    author: build.authorName,
    committedAt: timeOrNull(build.committedAt),
    receivedAt: time(build.createdAt),
    completedAt: timeOrNull(build.completedAt),
    current: build.current === 1,
    run: {
      id: build.runId,
      url: build.runUrl,
      startedAt: timeOrNull(build.startedAt),
      finishedAt: timeOrNull(build.finishedAt),
    },
    shards: { expected: build.shardCount, received, missing },
    baseline:
      build.baselineBuildId === null || build.baselineSha === null
        ? null
        : { buildId: String(build.baselineBuildId), commit: build.baselineSha },
    summary: summary.counts,
    worstError: summary.worst?.error ?? null,
  };
}

export function presentArrival({ position, receivedAt, bytes }: LoadedArrival): BuildDetail["arrivals"][number] {
  return { index: position, receivedAt: time(receivedAt), bytes };
}
