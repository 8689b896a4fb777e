import { afterAll, beforeAll, expect, it } from "vitest";
import { Project } from "../../server/db/models/Project.ts";
import { postCommitHistory } from "../../server/features/builds/commits.ts";
import { postBuild } from "../../server/features/builds/post.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import type { CommitDocument } from "../../shared/schemas/commit.ts";
import { integerBetween, mulberry32, shuffled } from "../support/random.ts";
import { randomHistory } from "../support/randomHistory.ts";
import { openRecord } from "../support/record.ts";
import type { TestRecord } from "../support/record.ts";
import { recordOf } from "./recordShape.ts";

const HISTORIES = 40;
/** Orders that each history is posted in; every fourth is posted in one more. */
const ORDERS = 2;

let record: TestRecord;
beforeAll(async () => {
  record = await openRecord();
});
afterAll(() => record.dispose());

const MODELS = ["rotor.thrust", "wake.deficit"];
const VALUES = [
  [1.5, -2.5],
  [3.5, 4.5],
];

/** What a story posts: builds, some of them twice, and news of commits alone. */
type Posting = { readonly build: BuildDocument } | { readonly commits: readonly CommitDocument[] };

/**
 * A history with a mistake in one entry of the first model and another in two entries of both, tested here and there;
 * some builds leave a block out, cannot tell, or were run again with a luckier or unluckier outcome.
 */
function storyOf(seed: number): Posting[] {
  const random = mulberry32(seed);
  const options = { commits: integerBetween(random, 5, 10), fork: 0.25, merge: 0.25, fix: 0.7 };
  const one = randomHistory(random, options);
  const truth = [one.truth, randomTruth(random, one.nodes)];
  const commits = new Map(
    one.nodes.map(({ sha, parents, committedAt }, at): [string, CommitDocument] => [
      sha,
      {
        sha,
        parents: [...parents],
        ...(random() < 0.6 ? { branch: random() < 0.7 ? "main" : "side" } : {}),
        ...(committedAt === null ? {} : { committedAt: new Date(Date.UTC(2026, 0, 1) + committedAt).toISOString() }),
        author: { name: at % 2 === 0 ? "Ada" : "Brook" },
        changedPaths: [random() < 0.5 ? "src/rotor/thrust.f90" : `docs/${at}.md`],
      },
    ]),
  );
  const tested = one.nodes.filter(() => random() < 0.6).map(({ sha }) => sha);
  const postings: Posting[] = [{ commits: [...commits.values()] }];
  tested.forEach((sha, at) => {
    const runs = random() < 0.15 ? 2 : 1;
    for (let run = 0; run < runs; run++) {
      const wrong = truth.map((of) => of.get(sha) === "bad" && run === runs - 1);
      const build = buildOf(random, commits.get(sha) as CommitDocument, wrong, `${at} ${run}`);
      postings.push({ build });
      if (random() < 0.15) postings.push({ build });
    }
  });
  return postings;
}

function randomTruth(
  random: () => number,
  nodes: ReturnType<typeof randomHistory>["nodes"],
): Map<string, "good" | "bad"> {
  const bad = new Set<string>();
  const from = nodes[integerBetween(random, 0, nodes.length - 1)]?.sha ?? "";
  for (const { sha, parents } of nodes) if (sha === from || parents.some((parent) => bad.has(parent))) bad.add(sha);
  return new Map(nodes.map(({ sha }) => [sha, bad.has(sha) ? "bad" : "good"]));
}

function buildOf(
  random: () => number,
  commit: CommitDocument,
  wrong: readonly boolean[],
  runId: string,
): BuildDocument {
  const models = MODELS.filter(() => random() < 0.9);
  return {
    format: "clinograph.build/1",
    commit,
    // The account that a run gives of itself decides between runs, not the order in which they come.
    run: { id: runId, finishedAt: new Date(Date.UTC(2026, 1, 1, 0, 0, Number(runId.split(" ")[1]))).toISOString() },
    blocks: models.map((model, at) => {
      const values = VALUES.map((row) => [...row]);
      if (wrong[0] && at === 0) (values[0] as number[])[0] = -1.5;
      if (wrong[1]) (values[1] as number[])[1] = -4.5;
      const coarse = random() < 0.15;
      const moved = random() < 0.2 ? 1.25 : 1;
      return {
        model,
        output: { name: "f", size: 2 },
        input: { name: "x", size: 2 },
        derivative: { method: "analytic", values: values.map((row) => row.map((value) => value * moved)) },
        references: [
          {
            method: "complex-step",
            step: 1e-20,
            values: VALUES.map((row) => row.map((value) => value * moved)),
            ...(coarse ? { uncertainty: 100 } : {}),
          },
        ],
        sources: [`src/${model.replace(".", "/")}.f90`],
      };
    }),
  };
}

async function postAll(slug: string, postings: readonly Posting[]): Promise<unknown> {
  const { context } = record;
  const project = await context.db.write((w) =>
    w.create(Project, { slug, name: slug, defaultBranch: "main", createdAt: Date.now() }),
  );
  for (const posting of postings) {
    if ("commits" in posting) {
      await postCommitHistory(context, project, posting.commits);
      continue;
    }
    const bytes = Buffer.from(JSON.stringify(posting.build));
    await postBuild(context, project, { bytes, encoding: "identity" }, "kept");
  }
  return recordOf(context.db, project.id);
}

it(`is the same record for ${HISTORIES} histories, in whatever order their postings come`, async () => {
  let breaks = 0;
  for (let seed = 1; seed <= HISTORIES; seed++) {
    const postings = storyOf(seed);
    const told = await postAll(`history-${seed}`, postings);
    breaks += (told as { breaks: unknown[] }).breaks.length;
    for (let order = 1; order < ORDERS + (seed % 4 === 0 ? 1 : 0); order++) {
      const mixed = shuffled(mulberry32(1000 * seed + order), postings);
      expect(await postAll(`history-${seed}-${order}`, mixed), `history ${seed}, order ${order}`).toEqual(told);
    }
  }
  expect(breaks).toBeGreaterThan(HISTORIES / 2);
}, 300_000);
