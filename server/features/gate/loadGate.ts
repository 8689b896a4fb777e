import type { GatePolicy } from "../../../shared/domain/vocabulary.ts";
import { decideGate } from "../../../shared/history/decideGate.ts";
import { nearestJudgedAncestor } from "../../../shared/history/nearestJudgedAncestor.ts";
import type { GateBlock, GateOutcome } from "../../../shared/history/types.ts";
import type { Reader } from "../../db/reader.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import { countSql, JOIN_COVERAGE } from "../../record/countsSql.ts";
import { findLane, loadLaneBuilds } from "../../record/laneBuilds.ts";
import { loadGateEntries } from "./loadGateEntries.ts";
import { loadGateRises } from "./loadGateRises.ts";

export interface GateQuestion {
  readonly project: { readonly id: number; readonly policy: GatePolicy };
  readonly lane: string;
  readonly commit: string;
  /** Null for the newest judged ancestor on the default branch. */
  readonly base: string | null;
}

export interface GateAnswer extends GateOutcome {
  readonly base: string | null;
  /** The build that was asked about. */
  readonly buildId: number | null;
}

/** A block of a build as the gate looks at it. */
export interface GateBlockRow extends GateBlock {
  readonly snapshotId: number;
  readonly bad: number;
  /** Verdicts with earlier checks heard, or null where the build's own stand. */
  readonly coveragePlanes: Buffer | null;
  readonly output: string;
  readonly input: string;
  readonly point: string;
}

/** Loads what the gate has to know of a commit and its base, and decides. */
export async function loadGate(reader: Reader, question: GateQuestion, now: number): Promise<GateAnswer> {
  const { project, lane, commit } = question;
  const { policy } = project;
  const laneId = await findLane(reader, project.id, lane);
  const history = await loadGraph(reader, project.id);
  const { graph, mainline } = history;
  const { speaking } = laneId === null ? { speaking: new Map<string, never>() } : await loadLaneBuilds(reader, laneId);
  const onMainline = (sha: string) => mainline.has(sha) && speaking.has(sha);
  const base = question.base ?? nearestJudgedAncestor(graph, commit, onMainline);
  const headId = speaking.get(commit)?.id ?? null;
  if (laneId === null || headId === null) {
    const state = laneId !== null && (await isReceiving(reader, laneId, commit)) ? "receiving" : null;
    const nothing = { head: [], baseBlocks: [], bad: [], rises: [] };
    return { ...decideGate({ lane, commit, base, state, policy, ...nothing }), base, buildId: null };
  }
  const head = await loadBlocks(reader, headId);
  const baseId = base === null ? null : (speaking.get(base)?.id ?? null);
  const baseBlocks = baseId === null ? [] : await loadBlocks(reader, baseId);
  const place = { projectId: project.id, lane, laneId, commit };
  const bad = await loadGateEntries(reader, place, head, baseBlocks, now);
  const rises = await loadGateRises(
    reader,
    { projectId: project.id, laneId, project: history, builds: { speaking } },
    { commit, base },
    head,
  );
  const outcome = decideGate({ lane, commit, base, state: "complete", head, baseBlocks, bad, rises, policy });
  return { ...outcome, base, buildId: headId };
}

async function isReceiving(reader: Reader, laneId: number, sha: string): Promise<boolean> {
  const rows = await reader.select(
    `SELECT 1 FROM builds b JOIN commits c ON c.id = b.commitId
     WHERE b.laneId = $1 AND c.sha = $2 AND b.state = 'receiving' LIMIT 1`,
    [laneId, sha],
  );
  return rows.length > 0;
}

async function loadBlocks(reader: Reader, buildId: number): Promise<GateBlockRow[]> {
  type Told = { readonly blockId: number; readonly probe: string; readonly sentence: string | null };
  type Row = Omit<GateBlockRow, "blockId" | "block" | "probe"> & Told;
  const rows = await reader.select<Row>(
    `SELECT bb.blockId, bb.snapshotId, b.model, b.output, b.input, b.point, b.probe,
       s.rowCount * s.columnCount AS entries, ${countSql("unreferenced")} AS unreferenced,
       ${countSql("unresolved")} AS unresolved, ${countSql("disagrees")} + ${countSql("invalid")} AS bad,
       v.planes AS coveragePlanes,
       CASE WHEN b.probe <> '' THEN
         (SELECT d.details ->> '$.probe.sentence' FROM block_details d WHERE d.id = bb.detailsId) END AS sentence
     FROM build_blocks bb JOIN snapshots s ON s.id = bb.snapshotId JOIN blocks b ON b.id = bb.blockId ${JOIN_COVERAGE}
     WHERE bb.buildId = $1`,
    [buildId],
  );
  return rows.map((row) => ({
    ...row,
    blockId: String(row.blockId),
    block: blockName(row),
    probe: row.probe === "" ? null : { name: row.probe, sentence: row.sentence ?? "" },
  }));
}

/** As people read it; the point is told only where it is not the usual one. */
function blockName({ output, input, point }: { output: string; input: string; point: string }): string {
  return point === "nominal" ? `${output} by ${input}` : `${output} by ${input} at ${point}`;
}
