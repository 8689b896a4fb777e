import { planChecks } from "../../../shared/plan/planChecks.ts";
import type { Plan } from "../../../shared/schemas/plan.ts";
import type { Reader } from "../../db/reader.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import { loadLaneBuilds } from "../../record/laneBuilds.ts";
import type { PlanPlace } from "./byColumn.ts";
import { loadChangeClues } from "./changeClues.ts";
import { columnsOfLane } from "./columnFacts.ts";
import type { LaneFacts } from "./columnFacts.ts";
import { laneLine } from "./laneLine.ts";
import type { LaneLine } from "./laneLine.ts";
import { loadBrokenColumns } from "./loadBrokenColumns.ts";
import { loadChecks, loadPlannedBlocks } from "./loadChecks.ts";
import { loadClimbingColumns } from "./loadClimbingColumns.ts";
import { loadUnresolvedColumns } from "./loadUnresolvedColumns.ts";
import { presentPlan } from "./present.ts";

export interface PlanWanted extends Omit<PlanPlace, "laneId"> {
  /** Null where nothing was posted to the lane. */
  readonly laneId: number | null;
  readonly budget: Plan["budget"];
  readonly limit: number;
}

/** What the next build of a lane should check, told from its builds on the default branch. */
export async function loadPlan(reader: Reader, wanted: PlanWanted): Promise<Plan> {
  const { lane, laneId, budget, limit, projectId } = wanted;
  const project = await loadGraph(reader, projectId);
  const speaking = laneId === null ? new Map() : (await loadLaneBuilds(reader, laneId)).speaking;
  const line = laneLine(project, speaking);
  const newest = line.builds[0];
  if (laneId === null || newest === undefined) return nothingPosted(lane, budget, limit);
  const facts = await loadFacts(reader, { ...wanted, laneId }, line, limit);
  const columns = columnsOfLane(facts, budget.unit);
  const planned = planChecks(columns, budget.amount);
  const lists = presentPlan(facts, columns, planned, budget.unit);
  return { lane, commit: newest.sha, buildId: String(newest.id), budget, limit, ...lists };
}

async function loadFacts(reader: Reader, place: PlanPlace, line: LaneLine, limit: number): Promise<LaneFacts> {
  const blocks = await loadPlannedBlocks(reader, line.builds[0].id);
  const checks = await loadChecks(reader, blocks, line.builds);
  const places = new Map(line.commits.map((sha, at) => [sha, at]));
  return {
    blocks,
    checks,
    broken: await loadBrokenColumns(reader, place, blocks),
    climbing: await loadClimbingColumns(reader, place, line, blocks),
    unresolved: await loadUnresolvedColumns(reader, blocks, checks),
    clueSince: await loadChangeClues(reader, place.projectId, line, blocks, checks),
    placeOf: (sha) => places.get(sha) ?? line.commits.length,
    limit,
  };
}

function nothingPosted(lane: string, budget: Plan["budget"], limit: number): Plan {
  return {
    lane,
    commit: null,
    buildId: null,
    budget,
    spent: 0,
    limit,
    everyBuilds: null,
    everyBuildsReason: "Nothing was posted to this lane yet.",
    items: [],
    left: [],
    tooDear: [],
  };
}
