import type { BlockName } from "../../../shared/domain/selector.ts";
import type { ClimbGroup } from "../../../shared/history/groupClimbs.ts";
import { risingRange, risingSuspects } from "../../../shared/history/risingSuspects.ts";
import type { RiseStep, RisingSuspects } from "../../../shared/history/risingSuspects.ts";
import type { Reader } from "../../db/reader.ts";
import type { BlockDetails } from "../../ingest/blockDetails.ts";
import { loadCommitFacts } from "../../record/commitFacts.ts";
import type { CommitFacts } from "../../record/commitFacts.ts";
import type { LaneBuild } from "../../record/laneBuilds.ts";
import { loadEntrySeries } from "../history/loadEntrySeries.ts";
import type { EntrySeries } from "../history/loadEntrySeries.ts";
import type { ClimbLane, ClimbsAt } from "./loadClimbs.ts";
import { loadBeyond } from "./loadBeyond.ts";

/** A climb with what its worst entry's history says of it. */
export interface TracedClimb {
  readonly group: ClimbGroup;
  readonly block: BlockName;
  readonly row: number;
  readonly column: number;
  /** Of the worst entry above its baseline in the build that is spoken of; null where that tells nothing of it. */
  readonly decades: number | null;
  /** Entries of it that are past the tolerance there. */
  readonly beyond: number;
  readonly onset: LaneBuild;
  readonly toldBy: LaneBuild;
  readonly lastCalm: LaneBuild | null;
  readonly endedBy: LaneBuild | null;
  readonly traced: RisingSuspects;
  readonly commits: ReadonlyMap<string, CommitFacts>;
}

export async function traceClimb(
  reader: Reader,
  lane: ClimbLane,
  group: ClimbGroup,
  { chain, until }: Pick<ClimbsAt, "chain" | "until">,
): Promise<TracedClimb> {
  const { blockId, columns, worstEntry, onset, told } = group.worst;
  const row = Math.floor(worstEntry / columns);
  const column = worstEntry % columns;
  const series = await loadEntrySeries(reader, {
    projectId: lane.projectId,
    laneId: lane.laneId,
    blockId,
    row,
    column,
  });
  const lastCalm = calmBefore(chain, series, onset);
  const within = (build: LaneBuild, at: number) => at >= onset && at <= told && holds(series, build);
  const steps = risesOf(series, chain.filter(within), lastCalm);
  const { graph } = lane.project;
  const suspects = risingRange(graph, { calm: lastCalm?.sha ?? null, told: chain[told].sha });
  const commits = await loadCommitFacts(reader, lane.projectId, suspects);
  const [{ details, ...block }] = await reader.select<BlockName & { details: string }>(
    `SELECT b.model, b.output, b.input, b.point, b.probe, d.details FROM blocks b
     JOIN build_blocks bb ON bb.blockId = b.id AND bb.buildId = $2 JOIN block_details d ON d.id = bb.detailsId
     WHERE b.id = $1`,
    [blockId, chain[told].id],
  );
  const factsOf = (sha: string) => ({
    sha,
    changedPaths: commits.get(sha)?.changedPaths ?? null,
    author: commits.get(sha)?.author ?? null,
    isOnset: false,
  });
  const context = { models: [group.model], sources: (JSON.parse(details) as BlockDetails).sources, motion: null };
  return {
    group,
    block,
    row,
    column,
    decades: series.drift.get(chain[until].id)?.decades ?? null,
    beyond: await loadBeyond(reader, group, chain[until].id),
    onset: chain[onset],
    toldBy: chain[told],
    lastCalm,
    endedBy: group.endedAt === null || group.kind === "jump" ? null : chain[group.endedAt],
    traced: risingSuspects(graph, suspects, steps, factsOf, context, lane.builds.speaking),
    commits,
  };
}

const holds = (series: EntrySeries, build: LaneBuild) => series.drift.has(build.id);

/** The last build before the onset that told something of the entry. */
function calmBefore(chain: readonly LaneBuild[], series: EntrySeries, onset: number): LaneBuild | null {
  return chain.slice(0, onset).findLast((build) => holds(series, build)) ?? null;
}

function risesOf(series: EntrySeries, rising: readonly LaneBuild[], calm: LaneBuild | null): RiseStep[] {
  const level = (build: LaneBuild) => {
    const point = series.drift.get(build.id);
    return (point?.decades ?? 0) + (point?.centre ?? 0);
  };
  return rising.map((build, at) => {
    const before = at === 0 ? calm : rising[at - 1];
    return { sha: build.sha, decades: before === null ? 0 : level(build) - level(before) };
  });
}
