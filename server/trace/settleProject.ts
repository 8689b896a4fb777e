import type { BlockName } from "../../shared/domain/selector.ts";
import type { Writer } from "../db/write.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import { loadCommitFacts } from "../record/commitFacts.ts";
import { loadGraph } from "../record/commitGraph.ts";
import type { ProjectGraph } from "../record/commitGraph.ts";
import { loadLaneBuilds } from "../record/laneBuilds.ts";
import type { LaneBuild, LaneBuilds } from "../record/laneBuilds.ts";
import { updateBaselines } from "./baselines.ts";
import { describeBreak } from "./describeBreak.ts";
import type { BreakDescription } from "./describeBreak.ts";
import { updateCoverages } from "./coverage.ts";
import { retellDrift, updateDrift } from "./drift.ts";
import { addEverBad } from "./everBad.ts";
import { loadLaneTests } from "./laneTests.ts";
import { matchBreaks, sameParts } from "./matchBreaks.ts";
import { updateMotions } from "./motions.ts";
import { rankSuspects } from "./rankSuspects.ts";
import { loadRecordedBreaks, recordedDescription, storeBreak, withdrawBreak } from "./storeBreaks.ts";
import type { RecordedBreak } from "./storeBreaks.ts";
import { traceLane } from "./traceLane.ts";
import type { LaneBreak } from "./traceLane.ts";

export interface Lane {
  readonly projectId: number;
  readonly laneId: number;
}

/** A build that was completed just now. */
export interface Arrival {
  readonly laneId: number;
  readonly buildId: number;
}

/**
 * Brings a project's record up to date after a build was completed, or after commits alone were told: baselines,
 * motions and breaks, all told from the whole lane, so that they are the same in whatever order builds came. Every lane
 * is looked at, because new commits may be suspects in all of them. In the transaction that stored what is new: what is
 * acknowledged is traced.
 */
export async function settleProject(
  w: Writer,
  judge: JudgePool,
  projectId: number,
  arrival: Arrival | null,
  now: number,
): Promise<void> {
  const project = await loadGraph(w, projectId);
  const [{ checkLimit }] = await w.select<{ checkLimit: number }>("SELECT checkLimit FROM projects WHERE id = $1", [
    projectId,
  ]);
  for (const laneId of await loadLaneIds(w, projectId)) {
    const buildId = arrival?.laneId === laneId ? arrival.buildId : null;
    const builds = await loadLaneBuilds(w, laneId);
    const rebased = await updateBaselines(w, builds, project.graph, buildId);
    for (const one of rebased) await updateMotions(w, judge, one);
    await updateCoverages(w, judge, project.graph, builds.all, rebased, checkLimit);
    await updateDrift(w, judge, project, { projectId, laneId }, builds);
    if (buildId !== null) await addEverBad(w, laneId, buildId);
    const moved = new Set(rebased.map((one) => one.buildId));
    await retrace(w, project, { projectId, laneId }, builds, moved, now);
  }
}

/** Tells anew, with another limit, what every build says of the entries that it did not check itself. */
export async function retellCoverage(w: Writer, judge: JudgePool, projectId: number, limit: number): Promise<void> {
  const { graph } = await loadGraph(w, projectId);
  for (const laneId of await loadLaneIds(w, projectId)) {
    const { all } = await loadLaneBuilds(w, laneId);
    const every = all.map(({ id, baselineBuildId }) => ({ buildId: id, baselineBuildId }));
    await updateCoverages(w, judge, graph, all, every, limit);
  }
}

/** Tells the drift of the blocks that `covers` names anew, in every lane. */
export async function retellDrifts(
  w: Writer,
  judge: JudgePool,
  projectId: number,
  covers: (block: BlockName, lane: string) => boolean,
): Promise<void> {
  const project = await loadGraph(w, projectId);
  for (const laneId of await loadLaneIds(w, projectId)) {
    await retellDrift(w, judge, project, { projectId, laneId }, await loadLaneBuilds(w, laneId), covers);
  }
}

async function loadLaneIds(w: Writer, projectId: number): Promise<number[]> {
  const lanes = await w.select<{ id: number }>("SELECT id FROM lanes WHERE projectId = $1 ORDER BY id", [projectId]);
  return lanes.map(({ id }) => id);
}

/** `moved`: builds whose motions were told anew. */
async function retrace(
  w: Writer,
  project: ProjectGraph,
  lane: Lane,
  builds: LaneBuilds,
  moved: ReadonlySet<number>,
  now: number,
): Promise<void> {
  const { speaking } = builds;
  const traced = traceLane(project, await loadLaneTests(w, lane.laneId, builds));
  const recorded = await loadRecordedBreaks(w, lane.laneId);
  const suspects = new Set(traced.flatMap((found) => found.suspects));
  const commits = await loadCommitFacts(w, lane.projectId, [...suspects]);
  const idOf = (sha: string | null) => (sha === null ? null : (speaking.get(sha)?.id ?? null));
  const { recordedOf, gone } = matchBreaks(recorded, traced);
  const ids: number[] = [];
  for (const [at, found] of traced.entries()) {
    const onsetBuildId = (speaking.get(found.onset) as LaneBuild).id;
    const known = recordedOf[at];
    const description =
      keptDescription(known, found, onsetBuildId, moved) ?? (await describeBreak(w, onsetBuildId, found.parts));
    const described = {
      found,
      description,
      trace: rankSuspects(project, found, description, commits, speaking),
      onsetBuildId,
      lastGoodBuildId: idOf(found.lastGood),
      repairedByBuildId: idOf(found.repairedBy),
    };
    ids.push(await storeBreak(w, lane, described, known, now));
  }
  for (const { recorded: old, successor } of gone) {
    await withdrawBreak(w, old.id, successor === null ? null : ids[successor], now);
  }
}

/** What the same build said of the same entries before, so that their numbers are not read again; null if not. */
function keptDescription(
  known: RecordedBreak | null,
  found: LaneBreak,
  onsetBuildId: number,
  moved: ReadonlySet<number>,
): BreakDescription | null {
  if (known === null || known.told.onsetBuildId !== onsetBuildId || moved.has(onsetBuildId)) return null;
  return sameParts(known.parts, found.parts) ? recordedDescription(known) : null;
}
