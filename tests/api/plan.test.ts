import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { plan as planSchema } from "../../shared/schemas/plan.ts";
import type { Plan } from "../../shared/schemas/plan.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import { packEntries } from "../../server/record/entryList.ts";
import { blockOf, buildOf, commitOf, flipped, numbers, post, shaOf } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

type Block = BuildDocument["blocks"][number];
type Reference = NonNullable<Block["references"]>[number];

const THRUST = numbers(3, 4, 1);
const TENSION = numbers(2, 2, 5);
const only = (values: number[][], columns: number[]) => values.map((row) => columns.map((c) => row[c]));

/** A block whose reference covers some columns, or none. */
function covering(
  model: string,
  values: number[][],
  columns: number[] | null,
  wish: Partial<Reference> = {},
  derivative: number[][] = values,
): Block {
  const block = blockOf({ model, derivative, reference: values });
  const reference: Reference = {
    method: "complex-step",
    step: 1e-20,
    values: columns === null ? values : only(values, columns),
    ...(columns === null ? {} : { columns }),
    ...wish,
  };
  return { ...block, references: columns?.length === 0 ? [] : [reference] };
}

let server: TestServer;
let hull: SeededProject;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.close());

async function ask(query: string): Promise<Plan> {
  const response = await server
    .guest()
    .get(`/api/v1/projects/${hull.slug}/plan${query}`)
    .set("Authorization", `Bearer ${hull.tokens.read}`);
  expect(response.status).toBe(200);
  return planSchema.parse(response.body);
}

describe("a lane's plan", () => {
  const wrong = flipped(THRUST, [
    [0, 1],
    [2, 1],
  ]);
  beforeAll(async () => {
    hull = await server.seedProject("hull", { "lead@example.org": "lead" });
    const cost = { evaluations: 8, seconds: 2 };
    // 1 checks all, of thrust with 2 evaluations a column; 2 and 4 check parts of it, and tension no more.
    await post(
      server,
      hull,
      buildOf(commitOf(1), [
        covering("rotor.thrust", THRUST, null, { cost }),
        covering("mooring.tension", TENSION, null),
      ]),
    );
    await post(
      server,
      hull,
      buildOf(commitOf(2), [
        covering("rotor.thrust", THRUST, [0, 1], {}, wrong),
        covering("mooring.tension", TENSION, []),
      ]),
    );
    await post(
      server,
      hull,
      buildOf(
        commitOf(4),
        [
          covering("rotor.thrust", THRUST, [1], {}, wrong),
          covering("mooring.tension", TENSION, []),
          covering("wake.deficit", [[1, 2]], []),
        ],
        // Commit 3 changes the source of rotor.thrust.
        { history: [commitOf(3)] },
      ),
    );
  });

  it("names the broken column first, then what changed, was never checked and waited, each with how and when", async () => {
    const answer = await ask("?evaluations=100");
    expect(answer).toMatchObject({
      lane: "default",
      commit: shaOf(4),
      budget: { unit: "evaluations", amount: 100 },
      limit: 20,
      everyBuilds: 1,
      everyBuildsReason: null,
      left: [],
      tooDear: [],
    });
    const complex = [{ method: "complex-step", steps: [1e-20], stepKind: "absolute" }];
    const changed = "Commit 0000000 changes src/rotor/thrust.f90, a source of rotor.thrust, after the last check.";
    expect(answer.items.map(({ blockId: _, output: __, input: ___, point: ____, ...item }) => item)).toEqual([
      {
        model: "rotor.thrust",
        columns: [1],
        reason: { code: "open-break", sentence: "Two entries are in open break 1." },
        cost: 2,
        assumed: false,
        lastCheck: { commit: shaOf(4), buildId: answer.buildId, buildsAgo: 0 },
        references: complex,
      },
      {
        model: "rotor.thrust",
        columns: [2, 3],
        reason: { code: "source-changed", sentence: changed },
        cost: 4,
        assumed: false,
        lastCheck: expect.objectContaining({ commit: shaOf(1), buildsAgo: 2 }),
        references: complex,
      },
      {
        model: "rotor.thrust",
        columns: [0],
        reason: { code: "source-changed", sentence: changed },
        cost: 2,
        assumed: false,
        lastCheck: expect.objectContaining({ commit: shaOf(2), buildsAgo: 1 }),
        references: complex,
      },
      {
        model: "wake.deficit",
        columns: [0, 1],
        reason: { code: "never-checked", sentence: "Posted for the first time and not checked." },
        cost: 4,
        assumed: true,
        lastCheck: null,
        references: [],
      },
      {
        model: "mooring.tension",
        columns: [0, 1],
        reason: { code: "rotation", sentence: "Two builds have passed since the last check: its turn." },
        cost: 2,
        assumed: true,
        lastCheck: expect.objectContaining({ commit: shaOf(1), buildsAgo: 2 }),
        references: complex,
      },
    ]);
    expect(answer.spent).toBe(14);
  });

  it("keeps half for what waited longest and leaves the rest, longest waiting first", async () => {
    const answer = await ask("?evaluations=4");
    expect(answer.items.map(({ model, columns, reason }) => [model, columns, reason.code])).toEqual([
      ["rotor.thrust", [1], "open-break"],
      ["rotor.thrust", [2], "source-changed"],
    ]);
    expect(answer.left.map(({ model, columns, waited }) => [model, columns, waited])).toEqual([
      ["rotor.thrust", [0, 3], 2],
      ["mooring.tension", [0, 1], 2],
      ["wake.deficit", [0, 1], 0],
    ]);
    expect(answer).toMatchObject({ spent: 4, everyBuilds: 7 });
  });

  it("converts by the project's rate where seconds are the budget", async () => {
    const answer = await ask("?seconds=0.6");
    // 2 s for 8 evaluations: a column of thrust takes 0.5 s, one of tension an assumed 0.25 s.
    expect(answer.items.map(({ model, cost, assumed }) => [model, cost, assumed])).toEqual([
      ["rotor.thrust", 0.5, false],
    ]);
    expect(answer.everyBuilds).toBe(8);
  });

  it("lists what a whole budget does not pay, and says why nothing is promised", async () => {
    const answer = await ask("?evaluations=1");
    expect(answer.everyBuilds).toBeNull();
    expect(answer.everyBuildsReason).toBe(
      "Six columns cost more than the whole budget; the dearest takes 2 evaluations.",
    );
    expect(answer.tooDear.map(({ model, columns, cost }) => [model, columns, cost])).toEqual([
      ["rotor.thrust", [0, 1, 2, 3], 2],
      ["wake.deficit", [0, 1], 2],
    ]);
    expect(answer.items).toHaveLength(1);
  });

  it("tells the project's own limit, and that a column is near it", async () => {
    const lead = await server.agent("lead@example.org");
    await lead.patch("/api/v1/projects/hull").send({ checkLimit: 2 }).expect(200);
    const answer = await ask("?evaluations=100");
    expect(answer.limit).toBe(2);
    expect(answer.items.find(({ model }) => model === "mooring.tension")?.reason).toEqual({
      code: "near-limit",
      sentence: "Two builds have passed since the last check; after two it counts as unreferenced.",
    });
  });

  it("is empty, with the reason, where nothing was posted", async () => {
    expect(await ask("?seconds=1&lane=nowhere")).toMatchObject({
      lane: "nowhere",
      commit: null,
      items: [],
      everyBuilds: null,
      everyBuildsReason: "Nothing was posted to this lane yet.",
    });
  });

  it.each([
    "",
    "?seconds=1&evaluations=1",
    "?seconds=0",
    "?seconds=-1",
    "?seconds=NaN",
    "?evaluations=1e400",
    "?budget=1",
  ])("refuses %s", async (query) => {
    const response = await server
      .guest()
      .get(`/api/v1/projects/hull/plan${query}`)
      .set("Authorization", `Bearer ${hull.tokens.read}`);
    expect(response.status).toBe(422);
  });
});

describe("builds that follow their plans", () => {
  it("check every column within the builds that were promised, a new block included", async () => {
    hull = await server.seedProject("keel");
    const models: [string, number[][]][] = [
      ["a.one", numbers(2, 5, 1)],
      ["b.two", numbers(1, 3, 2)],
    ];
    const buildWith = async (n: number, plan: Plan | null) => {
      const blocks = models.map(([model, values]) => {
        const items = plan?.items.filter((item) => item.model === model) ?? [];
        return covering(model, values, plan === null ? null : items.flatMap(({ columns }) => columns));
      });
      await post(server, hull, buildOf(commitOf(n), blocks));
    };
    await buildWith(1, null);
    const first = await ask("?evaluations=2");
    expect(first.everyBuilds).toBe(8);
    let promised = first.everyBuilds ?? 0;
    for (let n = 2; n <= 22; n++) {
      if (n === 5) models.push(["c.three", numbers(1, 2, 3)]);
      await buildWith(n, await ask("?evaluations=2"));
      if (n === 5) promised = (await ask("?evaluations=2")).everyBuilds ?? 0;
      const now = await ask("?evaluations=100");
      const waits = now.items.map(({ lastCheck }) => lastCheck?.buildsAgo ?? n - 5);
      expect(Math.max(...waits), `after build ${n}`).toBeLessThan(promised);
    }
    const last = await ask("?evaluations=100");
    expect(last.items.every(({ lastCheck }) => lastCheck !== null)).toBe(true);
  });
});

it("counts the entries that the last check could not resolve", async () => {
  hull = await server.seedProject("wake");
  const coarse = covering("wake.deficit", THRUST, [0, 2], {
    uncertainty: [
      [1, 0],
      [0, 0],
      [1, 0],
    ],
  });
  // A probe has no columns to choose from.
  const probes: Block["probes"] = [{ kind: "dot-product", label: "seed 7", forward: 1.25, reverse: 1.25 }];
  await post(server, hull, buildOf(commitOf(1), [{ ...coarse, probes }]));
  const answer = await ask("?evaluations=100");
  expect(answer.items.map(({ columns, reason }) => [columns, reason.code, reason.sentence])).toEqual([
    [[1, 3], "never-checked", "Posted for the first time and not checked."],
    [[0], "unresolved", "The last check could not resolve two of three entries."],
    [[2], "rotation", "Its turn, though the newest build checked it."],
  ]);
});

it("puts a column that climbs before its quiet neighbours, until the climb ends", async () => {
  hull = await server.seedProject("cove");
  const { build } = await post(server, hull, buildOf(commitOf(1), [covering("wake.deficit", THRUST, null)]));
  const tell = (kind: "climb" | "end", entries: number[]) =>
    server.context.db.write((w) =>
      w.run(
        `INSERT INTO drift_events (laneId, blockId, columnCount, buildId, kind, onsetBuildId, entries, decades, worstEntry)
         SELECT b.laneId, bb.blockId, 4, b.id, $2, b.id, $3, 1.25, $4
         FROM builds b JOIN build_blocks bb ON bb.buildId = b.id WHERE b.id = $1`,
        [Number(build.id), kind, packEntries(Uint32Array.from(entries)), entries[0]],
      ),
    );
  const lines = async () =>
    (await ask("?evaluations=100")).items.map(({ columns, reason }) => [columns, reason.sentence]);
  // Entries of a matrix of four columns: one of column 2, two of column 3.
  await tell("climb", [2, 7, 11]);
  expect(await lines()).toEqual([
    [[2, 3], "The error climbs, by 1.3 decades so far."],
    [[0, 1], "Its turn, though the newest build checked it."],
  ]);
  await tell("end", [2, 7]);
  expect((await lines())[0]).toEqual([[3], "The error climbs, by 1.3 decades so far."]);
  await tell("end", [11]);
  expect(await lines()).toEqual([[[0, 1, 2, 3], "Its turn, though the newest build checked it."]]);
});

it("does not tell the plan to whoever may not read", async () => {
  const path = "/api/v1/projects/hull/plan?seconds=1";
  expect((await server.guest().get(path)).status).toBe(401);
  const poster = (await server.seedProject("boom")).tokens.post;
  expect((await server.guest().get(path).set("Authorization", `Bearer ${poster}`)).status).toBe(404);
});
