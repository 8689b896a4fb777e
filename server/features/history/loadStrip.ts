import { fromWire } from "../../../shared/schemas/common.ts";
import type { Strip, StripColumn } from "../../../shared/schemas/commit.ts";
import type { Reader } from "../../db/reader.ts";
import { timeOrNull } from "../../http/present.ts";
import { readSummary, worstVerdict } from "../../record/buildSummary.ts";
import type { BuildSummary } from "../../record/buildSummary.ts";
import { loadCommitFacts } from "../../record/commitFacts.ts";
import type { CommitFacts } from "../../record/commitFacts.ts";
import { commitColumns } from "../../record/commitColumns.ts";
import { loadGraph } from "../../record/commitGraph.ts";
import { madeAt } from "../../record/laneBuilds.ts";
import { loadUnwaived } from "../breaks/loadUnwaived.ts";
import type { StoredTrace } from "../../trace/storedTrace.ts";

/** Columns of one strip; what is older is reached by the lists. */
const MOST_COLUMNS = 5000;

interface StripBuild {
  readonly id: number;
  readonly sha: string;
  readonly state: "complete" | "receiving";
  readonly summary: string | null;
}

interface BlockNameRow {
  readonly id: number;
  readonly model: string;
  readonly output: string;
  readonly input: string;
  readonly probe: string;
}

/** Every known commit in commit order with what the lane's build says of it, and the open breaks' suspects. */
export async function loadStrip(
  reader: Reader,
  projectId: number,
  lane: { readonly id: number | null; readonly name: string },
  rtol: number,
  now: number,
): Promise<Strip> {
  const project = await loadGraph(reader, projectId);
  const shas = commitColumns(project).slice(-MOST_COLUMNS);
  const facts = await loadCommitFacts(reader, projectId, shas);
  const builds = lane.id === null ? new Map<string, StripBuild>() : await loadStripBuilds(reader, lane.id);
  const names = await loadBlockNames(reader, projectId);
  return {
    lane: lane.name,
    rtol,
    columns: shas.map((sha) =>
      column(facts.get(sha) as CommitFacts, project.graph.parents(sha), project.mainline.has(sha), builds, names),
    ),
    brackets: await loadBrackets(reader, projectId, lane.name, now),
  };
}

/** The build that speaks for each commit; one still receiving where there is no other. */
async function loadStripBuilds(reader: Reader, laneId: number): Promise<Map<string, StripBuild>> {
  const rows = await reader.select<StripBuild>(
    `SELECT b.id, c.sha, b.state, b.summary FROM builds b JOIN commits c ON c.id = b.commitId WHERE b.laneId = $1
     ORDER BY b.state = 'complete', ${madeAt("b")}, b.id`,
    [laneId],
  );
  return new Map(rows.map((row) => [row.sha, row]));
}

async function loadBlockNames(reader: Reader, projectId: number): Promise<Map<number, BlockNameRow>> {
  const rows = await reader.select<BlockNameRow>(
    "SELECT id, model, output, input, probe FROM blocks WHERE projectId = $1",
    [projectId],
  );
  return new Map(rows.map((row) => [row.id, row]));
}

function column(
  facts: CommitFacts,
  parents: string[],
  mainline: boolean,
  builds: ReadonlyMap<string, StripBuild>,
  names: ReadonlyMap<number, BlockNameRow>,
): StripColumn {
  const build = builds.get(facts.sha);
  const summary = build?.summary ? readSummary(build.summary) : null;
  const worst = summary?.worst ?? null;
  const name = worst === null ? undefined : names.get(worst.blockId);
  return {
    commit: facts.sha,
    subject: facts.subject,
    author: facts.author,
    committedAt: timeOrNull(facts.committedAt),
    branch: facts.branch,
    mainline,
    parents,
    buildId: build ? String(build.id) : null,
    state: build?.state ?? null,
    worstError: finiteOrNull(worst?.error ?? null),
    verdict: summary === null ? null : worstVerdict(summary.counts),
    counts: summary === null ? null : countsOf(summary),
    worst:
      worst === null || name === undefined
        ? null
        : {
            model: name.model,
            output: name.output,
            input: name.input,
            probe: name.probe === "" ? null : name.probe,
            row: worst.row,
            column: worst.column,
          },
  };
}

function countsOf({ counts }: BuildSummary): NonNullable<StripColumn["counts"]> {
  const { entries, agrees, disagrees, unresolved, unreferenced, invalid } = counts;
  return { entries, agrees, disagrees, unresolved, unreferenced, invalid };
}

export function finiteOrNull(error: number | "NaN" | "Infinity" | "-Infinity" | null): number | null {
  if (error === null) return null;
  const value = fromWire(error);
  return Number.isFinite(value) ? value : null;
}

async function loadBrackets(reader: Reader, projectId: number, lane: string, now: number): Promise<Strip["brackets"]> {
  const open = await loadUnwaived(reader, projectId, lane, now);
  return open.reverse().map(({ id, onset, trace }) => ({
    breakId: String(id),
    onset,
    suspects: (JSON.parse(trace) as StoredTrace).suspects.map((suspect) => suspect.sha),
  }));
}
