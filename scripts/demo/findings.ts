import type { BlockRow } from "../../shared/schemas/block.ts";
import type { BreakDetail, BreakRow } from "../../shared/schemas/break.ts";
import type { BuildRow } from "../../shared/schemas/build.ts";
import type { ClimbRow } from "../../shared/schemas/climb.ts";
import type { Overview } from "../../shared/schemas/project.ts";
import type { LaneName } from "./blocks.ts";
import type { Client } from "./client.ts";
import type { DemoCommit } from "./history/history.ts";
import { PLANTED } from "./planted.ts";
import type { Planted } from "./planted.ts";
import { PROJECT } from "./project.ts";

/** What the server says of one planted mistake. */
export interface Finding {
  readonly planted: Planted;
  readonly commit: DemoCommit;
  /** The commit that the server names; null where it names none. */
  readonly named: string | null;
  /** How it tells of it, in words. */
  readonly how: string;
  readonly right: boolean;
}

const LANE: LaneName = "gcc-release";
const SILENT: LaneName = "clang-arm";
const base = `/projects/${PROJECT}`;

/** Asks the server for every planted mistake. Breaks are matched by their model, in the order of the commits. */
export async function findings(reader: Client, history: readonly DemoCommit[]): Promise<Finding[]> {
  const { items } = await reader.get<{ items: BreakRow[] }>(`${base}/breaks?state=all&lane=${LANE}&limit=500`);
  const place = new Map(history.map(({ commit }, at) => [commit.sha, at]));
  const breaks = [...items].sort((a, b) => place.get(a.onset.commit)! - place.get(b.onset.commit)!);
  const found: Finding[] = [];
  for (const planted of PLANTED) {
    const commit = history.find(({ plants }) => plants === planted.key)!;
    if (planted.told === "silence") found.push(await silence(reader, planted, commit, history));
    else if (planted.told === "reference") found.push(await reference(reader, planted, commit, history));
    else {
      const at = breaks.findIndex(({ models }) => models.includes(planted.model));
      const [row] = at < 0 ? [undefined] : breaks.splice(at, 1);
      found.push(row ? await broken(reader, planted, commit, row) : unnamed(planted, commit));
    }
  }
  return found;
}

const unnamed = (planted: Planted, commit: DemoCommit): Finding => ({
  planted,
  commit,
  named: null,
  how: "nothing is told of it",
  right: false,
});

async function broken(reader: Client, planted: Planted, commit: DemoCommit, row: BreakRow): Promise<Finding> {
  const { suspects, nextTest, number, state } = await reader.get<BreakDetail>(`${base}/breaks/${row.id}`);
  const named = suspects[0]?.commit ?? null;
  const rank = suspects.length === 1 ? "the one suspect" : `first of ${suspects.length} suspects`;
  const next = nextTest === null ? "" : `, next test ${nextTest.commit.slice(0, 8)}`;
  const how = `break ${number}, ${state}: ${rank}${next}`;
  return { planted, commit, named, how, right: named === commit.commit.sha };
}

/** The first build whose block bears the signature of a lost imaginary part. */
async function reference(
  reader: Client,
  planted: Planted,
  commit: DemoCommit,
  history: readonly DemoCommit[],
): Promise<Finding> {
  const { items } = await reader.get<{ items: BuildRow[] }>(`${base}/builds?lane=${LANE}&limit=500`);
  const current = new Map(items.filter((build) => build.current).map((build) => [build.commit, build]));
  for (const { commit: one } of history) {
    const build = current.get(one.sha);
    if (!build) continue;
    const blocks = await reader.get<{ items: BlockRow[] }>(`${base}/builds/${build.id}/blocks?limit=500`);
    const marked = blocks.items.some(
      ({ model, signatures }) =>
        model === planted.model && signatures.some(({ code }) => code === "reference-dropped-imaginary"),
    );
    if (!marked) continue;
    const how = "reference-dropped-imaginary, first at this commit";
    return { planted, commit, named: one.sha, how, right: one.sha === commit.commit.sha };
  }
  return unnamed(planted, commit);
}

/** The lane is told as silent since the build of a commit; right where the next commit of main took its runner away. */
async function silence(
  reader: Client,
  planted: Planted,
  commit: DemoCommit,
  history: readonly DemoCommit[],
): Promise<Finding> {
  const overview = await reader.get<Overview>(`${base}/summary?lane=${LANE}`);
  const silent = overview.silentLanes.find(({ lane }) => lane === SILENT);
  const { items } = await reader.get<{ items: BuildRow[] }>(`${base}/builds?lane=${SILENT}&limit=500`);
  const built = new Set(items.map((build) => build.commit));
  const last = history.findLastIndex(({ commit: one }) => built.has(one.sha));
  const next = history[last + 1];
  if (!silent || !next) return unnamed(planted, commit);
  const how = `silent for ${silent.commitsSince} commits, beginning with this one`;
  return { planted, commit, named: next.commit.sha, how, right: next.commit.sha === commit.commit.sha };
}

/** How the error of the loosened solve rose before it became a break. */
export interface Climb {
  /** The commit whose build told the climb. */
  readonly toldBy: string;
  readonly onset: string;
  /** Builds of the lane from there to the break. */
  readonly buildsBefore: number;
  readonly decades: number;
  /** Builds from the onset to the newest. */
  readonly builds: number;
}

/** What the server told of the loosened solve as a climb, while it was still within the tolerance. */
export async function climbOf(
  reader: Client,
  found: readonly Finding[],
  history: readonly DemoCommit[],
): Promise<Climb | null> {
  const finding = found.find(({ planted }) => planted.key === "loosened-solve");
  const { items } = await reader.get<{ items: ClimbRow[] }>(`${base}/climbs?state=all&lane=${LANE}`);
  const climb = items.find(({ kind, model }) => kind === "climb" && model === finding?.planted.model);
  if (!climb || !finding) return null;
  const built = history.filter(({ lanes }) => lanes.includes(LANE)).map(({ commit }) => commit.sha);
  return {
    toldBy: climb.toldBy.commit,
    onset: climb.onset.commit,
    buildsBefore: built.indexOf(finding.commit.commit.sha) - built.indexOf(climb.toldBy.commit),
    decades: climb.worst.decades ?? 0,
    builds: climb.builds,
  };
}
