import type { Writer } from "../db/write.ts";
import type { JudgePool } from "../ingest/judgePool.ts";
import { loadGraph } from "../record/commitGraph.ts";
import type { ProjectGraph } from "../record/commitGraph.ts";
import { loadLaneBuilds } from "../record/laneBuilds.ts";
import type { LaneBuild } from "../record/laneBuilds.ts";
import { updateBaselines } from "./baselines.ts";
import { describeBreak } from "./describeBreak.ts";
import { addEverBad } from "./everBad.ts";
import { loadLaneTests } from "./laneTests.ts";
import { isSettled, matchBreaks } from "./matchBreaks.ts";
import { updateMotions } from "./motions.ts";
import { rankSuspects } from "./rankSuspects.ts";
import { loadRecordedBreaks, storeBreak, withdrawBreak } from "./storeBreaks.ts";
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
  const lanes = await w.select<{ id: number }>("SELECT id FROM lanes WHERE projectId = $1 ORDER BY id", [projectId]);
  for (const { id: laneId } of lanes) {
    const buildId = arrival?.laneId === laneId ? arrival.buildId : null;
    for (const rebased of await updateBaselines(w, laneId, project.graph, buildId)) {
      await updateMotions(w, judge, rebased);
    }
    if (buildId !== null) await addEverBad(w, laneId, buildId);
    await retrace(w, project, { projectId, laneId }, now);
  }
}

async function retrace(w: Writer, project: ProjectGraph, lane: Lane, now: number): Promise<void> {
  const traced = traceLane(project, await loadLaneTests(w, lane.laneId));
  const recorded = await loadRecordedBreaks(w, lane.laneId);
  const { speaking } = await loadLaneBuilds(w, lane.laneId);
  const { recordedOf, gone } = matchBreaks(recorded, traced);
  const ids: number[] = [];
  for (const [at, found] of traced.entries()) {
    const known = recordedOf[at];
    const onsetBuild = speaking.get(found.onset) as LaneBuild;
    if (known !== null && isSettled(known, found, onsetBuild.id)) {
      ids.push(known.id);
      continue;
    }
    const described = await describe(w, project, lane, found, speaking);
    ids.push(await storeBreak(w, lane, described, known, now));
  }
  for (const { recorded: old, successor } of gone) {
    await withdrawBreak(w, old.id, successor === null ? null : ids[successor], now);
  }
}

async function describe(
  w: Writer,
  project: ProjectGraph,
  lane: Lane,
  found: LaneBreak,
  speaking: ReadonlyMap<string, LaneBuild>,
) {
  const idOf = (sha: string | null) => (sha === null ? null : (speaking.get(sha)?.id ?? null));
  const onsetBuildId = (speaking.get(found.onset) as LaneBuild).id;
  const description = await describeBreak(w, onsetBuildId, found.parts);
  return {
    found,
    description,
    trace: await rankSuspects(w, lane.projectId, project, found, description, speaking),
    onsetBuildId,
    lastGoodBuildId: idOf(found.lastGood),
    repairedByBuildId: idOf(found.repairedBy),
  };
}
