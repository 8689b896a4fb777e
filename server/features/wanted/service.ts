import type { Wanted } from "../../../shared/schemas/wanted.ts";
import type { Context } from "../../context.ts";
import type { Project } from "../../db/models/Project.ts";
import { WantedBuild } from "../../db/models/WantedBuild.ts";
import type { Reader } from "../../db/reader.ts";
import type { PersonActor } from "../../http/actor.ts";
import { Conflict, NotFound } from "../../http/problem.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import { findLane } from "../../record/laneBuilds.ts";
import type { StoredTrace } from "../../trace/storedTrace.ts";
import { loadUnwaived } from "../breaks/loadUnwaived.ts";
import { audit } from "../audit/audit.ts";
import { loadSilentLanes } from "../overview/silentLanes.ts";

type Item = Wanted["items"][number];

/**
 * What a CI scheduler should build next: commits that were asked for, then those that halve the suspects of most open
 * breaks, then the newest commit of lanes that fell silent without it.
 */
export async function loadWanted(reader: Reader, project: Project, lane: string | null, now: number): Promise<Item[]> {
  return merged([
    ...(await loadRequested(reader, project.id, lane)),
    ...(await loadNextTests(reader, project.id, lane, now)),
    ...(await loadSilent(reader, project.id, lane, now)),
  ]);
}

/** One build answers all reasons for it: the first reason is told, with the breaks of all. */
function merged(items: readonly Item[]): Item[] {
  const byBuild = new Map<string, Item>();
  for (const item of items) {
    const key = `${item.commit} ${item.lane}`;
    const known = byBuild.get(key);
    byBuild.set(key, {
      ...(known ?? item),
      breakIds: [...(known?.breakIds ?? []), ...item.breakIds],
      remainingAfter: known?.remainingAfter ?? item.remainingAfter,
    });
  }
  return [...byBuild.values()];
}

/** A request is answered by any complete build of its commit and lane. */
async function loadRequested(reader: Reader, projectId: number, lane: string | null): Promise<Item[]> {
  const rows = await reader.select<{ sha: string; lane: string }>(
    `SELECT w.sha, l.name AS lane FROM wanted_builds w JOIN lanes l ON l.id = w.laneId
     WHERE l.projectId = $1 AND ($2 IS NULL OR l.name = $2) AND NOT EXISTS (
       SELECT 1 FROM builds b JOIN commits c ON c.id = b.commitId
       WHERE b.laneId = w.laneId AND c.sha = w.sha AND b.state = 'complete')
     ORDER BY w.id`,
    [projectId, lane],
  );
  return rows.map(({ sha, lane: name }) => ({
    commit: sha,
    lane: name,
    reason: "requested",
    breakIds: [],
    remainingAfter: null,
  }));
}

async function loadNextTests(reader: Reader, projectId: number, lane: string | null, now: number): Promise<Item[]> {
  const rows = (await loadUnwaived(reader, projectId, lane, now)).reverse();
  const items = new Map<string, Item>();
  for (const { id, lane: name, trace } of rows) {
    const { nextTest } = JSON.parse(trace) as StoredTrace;
    if (nextTest === null) continue;
    const key = `${nextTest.commit} ${name}`;
    const known = items.get(key);
    items.set(key, {
      commit: nextTest.commit,
      lane: name,
      reason: "halves-suspects",
      breakIds: [...(known?.breakIds ?? []), String(id)],
      remainingAfter: Math.max(known?.remainingAfter ?? 0, nextTest.remainingAfter),
    });
  }
  return [...items.values()].sort((a, b) => b.breakIds.length - a.breakIds.length);
}

async function loadSilent(reader: Reader, projectId: number, lane: string | null, now: number): Promise<Item[]> {
  const silent = (await loadSilentLanes(reader, [projectId], now)).filter((one) => lane === null || one.lane === lane);
  const { defaultTip } = await loadGraph(reader, projectId);
  if (defaultTip === null) return [];
  const built = await reader.select<{ laneId: number }>(
    `SELECT b.laneId FROM builds b JOIN commits c ON c.id = b.commitId
     WHERE c.projectId = $1 AND c.sha = $2 AND b.state = 'complete'`,
    [projectId, defaultTip],
  );
  const waiting = silent.filter(({ laneId }) => built.every((build) => build.laneId !== laneId));
  return waiting.map((one) => ({
    commit: defaultTip,
    lane: one.lane,
    reason: "silent-lane",
    breakIds: [],
    remainingAfter: null,
  }));
}

/**
 * Asks for a build of a commit in a lane; asking twice is asking once.
 * @throws NotFound for a commit or lane that is not known; Conflict when the build is there.
 */
export async function askForBuild(
  context: Context,
  project: Project,
  actor: PersonActor,
  wanted: { readonly commit: string; readonly lane: string },
): Promise<Item> {
  return context.db.write(async (w) => {
    const { graph } = await loadGraph(w, project.id);
    if (!graph.has(wanted.commit)) throw new NotFound(`Commit ${wanted.commit} is not known.`);
    const laneId = await findLane(w, project.id, wanted.lane);
    if (laneId === null) throw new NotFound(`Nothing was posted to lane ${wanted.lane} yet.`);
    const built = await w.select(
      `SELECT 1 FROM builds b JOIN commits c ON c.id = b.commitId
       WHERE b.laneId = $1 AND c.sha = $2 AND b.state = 'complete'`,
      [laneId, wanted.commit],
    );
    if (built.length > 0) throw new Conflict("This commit was built in this lane already.");
    const where = { laneId, sha: wanted.commit };
    const known = await WantedBuild.findOne({ where, transaction: w.transaction });
    if (known === null) {
      await w.create(WantedBuild, { ...where, askedById: actor.id, createdAt: Date.now() });
      const target = `${wanted.commit.slice(0, 12)} in ${wanted.lane}`;
      await audit(w, actor, "wanted.ask", { projectId: project.id, target });
    }
    return { commit: wanted.commit, lane: wanted.lane, reason: "requested", breakIds: [], remainingAfter: null };
  });
}
