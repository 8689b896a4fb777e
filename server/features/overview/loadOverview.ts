import type { JacobianName } from "../../../shared/domain/selector.ts";
import type { Overview } from "../../../shared/schemas/project.ts";
import { loadBlockRows } from "../blocks/loadBlockRows.ts";
import type { Reader } from "../../db/reader.ts";
import { timeOrNull } from "../../http/present.ts";
import { resolutionCurve } from "../../ingest/resolutionBins.ts";
import type { ResolutionBins } from "../../ingest/resolutionBins.ts";
import { addUp, checkedShare } from "../../record/buildSummary.ts";
import { loadCommitFacts } from "../../record/commitFacts.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import type { ProjectGraph } from "../../record/commitGraph.ts";
import { loadLaneBuilds } from "../../record/laneBuilds.ts";
import type { LaneBuild } from "../../record/laneBuilds.ts";
import { loadBreaks } from "../breaks/loadBreaks.ts";
import { loadActiveWaivers, loadWaived } from "../breaks/waived.ts";
import { modelRows } from "./modelRows.ts";
import { climbsAt } from "./climbsAt.ts";
import { breaksAt } from "./breaksAt.ts";
import { presentResolution } from "./resolution.ts";
import { overviewSentence } from "./sentence.ts";
import { loadSilentLanes } from "./silentLanes.ts";

export interface OverviewWanted {
  readonly projectId: number;
  readonly lane: string;
  /** Null where nothing was posted to it. */
  readonly laneId: number | null;
  /** The commit to speak of; null for the newest judged one of the default branch. */
  readonly at: string | null;
  readonly rtol: number;
}

/** Everything the overview says of one commit of a lane: is it sound, and what is new against its baseline. */
export async function loadOverview(reader: Reader, wanted: OverviewWanted, now: number): Promise<Overview> {
  const { projectId, lane, laneId, rtol } = wanted;
  const project = await loadGraph(reader, projectId);
  const speaking = laneId === null ? new Map<string, LaneBuild>() : (await loadLaneBuilds(reader, laneId)).speaking;
  const commit = wanted.at ?? newestJudged(project, speaking);
  const build = commit === null ? undefined : speaking.get(commit);
  const facts = commit === null ? undefined : (await loadCommitFacts(reader, projectId, [commit])).get(commit);
  const blocks = build ? await loadBlockRows(reader, projectId, build.id) : [];
  const jacobians = blocks.filter(({ probe }) => probe === "");
  const baselineId = build?.baselineBuildId ?? null;
  const counts = build ? addUp(blocks) : null;
  const ofLane = await loadBreaks(reader, projectId, { lane, state: null });
  const waived = await loadWaived(reader, ofLane, await loadActiveWaivers(reader, projectId, now));
  const breaks = breaksAt(project, ofLane, waived, commit);
  const vanishedBlocks = build && baselineId !== null ? await loadVanished(reader, build.id, baselineId) : [];
  const climbs =
    laneId === null || commit === null
      ? []
      : await climbsAt(reader, { projectId, laneId, project, builds: { speaking } }, commit);
  return {
    lane,
    commit,
    buildId: build ? String(build.id) : null,
    subject: facts?.subject ?? null,
    author: facts?.author ?? null,
    committedAt: timeOrNull(facts?.committedAt ?? null),
    baseline: baselineId === null ? null : baselineOf(baselineId, speaking),
    rtol,
    counts,
    sentence: overviewSentence({
      commit,
      judged: build !== undefined,
      counts,
      newBreaks: breaks.fresh,
      repairedBreaks: breaks.repaired,
      openBreaks: breaks.open,
      vanished: vanishedBlocks.length,
      hasBaseline: baselineId !== null,
      newClimbs: climbs.filter(({ toldBy }) => toldBy === commit),
    }),
    openBreaks: breaks.open.map((one) => one.brief),
    newBreaks: breaks.fresh.map((one) => one.brief.id),
    repairedBreaks: breaks.repaired.map((one) => one.brief.id),
    climbs,
    silentLanes: (await loadSilentLanes(reader, [projectId], now)).map((silent) => ({
      lane: silent.lane,
      lastBuildAt: timeOrNull(silent.lastBuildAt),
      commitsSince: commitsSince(project, silent.lastCommit),
    })),
    vanishedBlocks,
    checkedShare: counts && checkedShare(counts),
    resolution: presentResolution(blocks, rtol),
    resolutionCurve: resolutionCurve(
      jacobians.map((block) => JSON.parse(block.resolutions) as ResolutionBins),
      counts?.entries ?? 0,
    ),
    models: modelRows(blocks),
  };
}

/** The newest commit of the default branch that the lane judged; failing that, the newest of any branch. */
function newestJudged(project: ProjectGraph, speaking: ReadonlyMap<string, LaneBuild>): string | null {
  const judged = project.graph.topological().filter((sha) => speaking.has(sha));
  return judged.findLast((sha) => project.mainline.has(sha)) ?? judged.at(-1) ?? null;
}

function baselineOf(baselineId: number, speaking: ReadonlyMap<string, LaneBuild>): Overview["baseline"] {
  const build = [...speaking.values()].find(({ id }) => id === baselineId);
  return build ? { commit: build.sha, buildId: String(build.id) } : null;
}

/** Blocks of the baseline that the build does not have; of one that was probed only, a probe stands for all of them. */
async function loadVanished(reader: Reader, buildId: number, baselineId: number): Promise<Overview["vanishedBlocks"]> {
  const rows = await reader.select<JacobianName & { blockId: number }>(
    `SELECT min(b.id) AS blockId, b.model, b.output, b.input, b.point
     FROM build_blocks bb JOIN blocks b ON b.id = bb.blockId
     LEFT JOIN blocks j ON j.projectId = b.projectId AND j.model = b.model AND j.point = b.point
       AND j.output = b.output AND j.input = b.input AND j.probe = ''
       AND EXISTS (SELECT 1 FROM build_blocks x WHERE x.buildId = $2 AND x.blockId = j.id)
     WHERE bb.buildId = $2 AND CASE
       WHEN b.probe = '' THEN b.id NOT IN (SELECT blockId FROM build_blocks WHERE buildId = $1)
       ELSE j.id IS NULL AND NOT EXISTS (SELECT 1 FROM build_blocks x JOIN blocks o ON o.id = x.blockId
         WHERE x.buildId = $1 AND o.model = b.model AND o.point = b.point AND o.output = b.output AND o.input = b.input)
       END
     GROUP BY b.model, b.output, b.input, b.point ORDER BY min(b.id)`,
    [buildId, baselineId],
  );
  return rows.map(({ blockId, model, output, input, point }) => ({
    blockId: String(blockId),
    model,
    output,
    input,
    point,
  }));
}

/** Commits of the default branch since a lane was last built. */
function commitsSince({ graph, mainline }: ProjectGraph, lastCommit: string): number {
  const built = graph.ancestors(lastCommit);
  return [...mainline].filter((sha) => !built.has(sha)).length;
}
