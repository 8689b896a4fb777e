import type { BreakDetail, BreakRow } from "../../shared/schemas/break.ts";
import { completeDocument } from "../report/document.ts";
import { postDocument } from "../report/post.ts";
import type { Target } from "../report/post.ts";
import { blocksOf } from "./blocks.ts";
import type { LaneName } from "./blocks.ts";
import type { Client } from "./client.ts";
import type { DemoCommit } from "./history/history.ts";
import type { PlantKey } from "./history/step.ts";
import { PLANTED } from "./planted.ts";
import { PROJECT } from "./project.ts";
import type { Progress } from "./progress.ts";

/** The mistake whose suspects the invented CI goes on to build, as the record asks, until one is left. */
const NARROWED: PlantKey = "left-behind";
const NARROWED_LANE: LaneName = "gcc-release";
const MINUTE = 60_000;
const TOLD_HISTORY = 200;

interface Seeding {
  readonly target: Target;
  readonly reader: Client;
  readonly history: readonly DemoCommit[];
  readonly progress: Progress;
}

/**
 * Posts the history build by build, oldest first, by the reporter's own modules. After the outage the CI builds what
 * the record wants next; everything else is posted once.
 */
export async function seed(seeding: Seeding): Promise<void> {
  const { history, progress } = seeding;
  const post = poster(seeding);
  const planted = history.findIndex(({ plants }) => plants === NARROWED);
  const firstAfter = history.findIndex(({ lanes }, at) => at > planted && lanes.includes(NARROWED_LANE));
  for (const [at, { lanes }] of history.entries()) {
    progress.at(at + 1, history.length, history[at]!.commit.subject ?? "");
    for (const lane of lanes) await post(at, lane, 0);
    if (at === firstAfter) await narrow(seeding, post, at);
  }
  progress.done();
}

type Post = (at: number, lane: LaneName, builtLater: number) => Promise<void>;

/** `builtLater`: milliseconds between the commit and its build, beyond the usual. */
function poster({ target, history }: Seeding): Post {
  return async (at, lane, builtLater) => {
    const { commit, code } = history[at]!;
    const began = Date.parse(commit.committedAt) + builtLater + 4 * MINUTE;
    const earlier = history.slice(Math.max(0, at - TOLD_HISTORY), at).map((one) => one.commit);
    const document = completeDocument(
      {
        lane,
        run: {
          startedAt: new Date(began).toISOString(),
          finishedAt: new Date(began + 9 * MINUTE).toISOString(),
        },
        blocks: blocksOf(code, lane),
      },
      { lane: null, shard: null, runId: `nightly-${at + 1}-${lane}` },
      {
        git: { commit, history: earlier.reverse(), branch: commit.branch ?? null, shallow: false },
        ci: { runId: null, attempt: null, runUrl: null, branch: null, sha: null, shard: null },
      },
    );
    await postDocument(target, document, { dryRun: false }, { patienceMs: 30_000, onRetry: () => undefined });
  };
}

/** Builds the next test of the outage's break until a single suspect is left. */
async function narrow({ reader, history, progress }: Seeding, post: Post, at: number): Promise<void> {
  const model = PLANTED.find(({ key }) => key === NARROWED)!.model;
  const now = Date.parse(history[at]!.commit.committedAt);
  for (let builds = 0; builds < history.length; builds += 1) {
    const { items } = await reader.get<{ items: BreakRow[] }>(
      `/projects/${PROJECT}/breaks?state=open&lane=${NARROWED_LANE}`,
    );
    const open = items.find(({ models }) => models.includes(model));
    if (!open) return;
    const { nextTest } = await reader.get<BreakDetail>(`/projects/${PROJECT}/breaks/${open.id}`);
    if (nextTest === null) return;
    const next = history.findIndex(({ commit }) => commit.sha === nextTest.commit);
    progress.at(at + 1, history.length, `next test: ${history[next]!.commit.subject}`);
    const late = now - Date.parse(history[next]!.commit.committedAt) + (builds + 1) * 20 * MINUTE;
    await post(next, NARROWED_LANE, late);
  }
}
