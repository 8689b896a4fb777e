import type { PostedBuild } from "../../../shared/schemas/build.ts";
import type { Project } from "../../db/models/Project.ts";
import type { Reader } from "../../db/reader.ts";
import { loadGate } from "../gate/loadGate.ts";
import { presentGate } from "../gate/present.ts";
import { policyOf } from "../projects/settings.ts";
import { summaryOf } from "../../record/buildSummary.ts";
import type { StoredTrace } from "../../trace/storedTrace.ts";
import { urlsOf } from "./urls.ts";

interface BuildRow {
  readonly id: number;
  readonly state: "receiving" | "complete";
  readonly lane: string;
  readonly laneId: number;
  readonly sha: string;
  /** JSON: BuildSummary; null while receiving. */
  readonly summary: string | null;
}

/** What a posting is answered: the build so far, its gate and the breaks that its commit has a part in. */
export async function composeAnswer(
  reader: Reader,
  project: Project,
  buildId: number,
  publicUrl: string,
  now: number,
): Promise<PostedBuild> {
  const urls = urlsOf(publicUrl, project.slug);
  const [build] = await reader.select<BuildRow>(
    `SELECT b.id, b.state, b.summary, l.name AS lane, l.id AS laneId, c.sha
     FROM builds b JOIN lanes l ON l.id = b.laneId JOIN commits c ON c.id = b.commitId WHERE b.id = $1`,
    [buildId],
  );
  const question = {
    project: { id: project.id, policy: policyOf(project) },
    lane: build.lane,
    commit: build.sha,
    base: null,
  };
  const gate = await loadGate(reader, question, now);
  const id = String(build.id);
  return {
    build: { id, url: urls.build(id), state: build.state, lane: build.lane, commit: build.sha },
    summary: (await summaryOf(reader, build)).counts,
    gate: presentGate(question, gate, urls),
    breaks: await loadBreaks(reader, build, urls),
  };
}

async function loadBreaks(
  reader: Reader,
  build: BuildRow,
  urls: ReturnType<typeof urlsOf>,
): Promise<PostedBuild["breaks"]> {
  const rows = await reader.select<{
    id: number;
    state: "open" | "repaired";
    onset: string;
    repairedBy: string | null;
    trace: string;
  }>(
    "SELECT id, state, onset, repairedBy, trace FROM breaks WHERE laneId = $1 AND withdrawnAt IS NULL ORDER BY number",
    [build.laneId],
  );
  return rows
    .filter((row) => row.repairedBy === build.sha || (JSON.parse(row.trace) as StoredTrace).bad.includes(build.sha))
    .map(({ id, state, onset }) => ({ id: String(id), url: urls.break(String(id)), state, onset }));
}
