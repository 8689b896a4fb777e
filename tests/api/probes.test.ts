import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { blockDetail, blockRow, historyItem } from "../../shared/schemas/block.ts";
import { breakDetail, breakRow } from "../../shared/schemas/break.ts";
import { buildRow, postedBuild } from "../../shared/schemas/build.ts";
import type { BuildDocument, PostedBuild } from "../../shared/schemas/build.ts";
import type { Selector } from "../../shared/domain/selector.ts";
import { page } from "../../shared/schemas/common.ts";
import { strip } from "../../shared/schemas/commit.ts";
import { gate } from "../../shared/schemas/gate.ts";
import { overview } from "../../shared/schemas/project.ts";
import { THRUST, blockOf, buildOf, commitOf, shaOf } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

type Block = BuildDocument["blocks"][number];
type Probe = NonNullable<Block["probes"]>[number];

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.close());

const dot = (reverse: number, label = "seed 7"): Probe => ({
  kind: "dot-product",
  label,
  forward: 1.25,
  reverse,
  scale: 2,
});
const remainder = (slope: 1 | 2): Probe => ({
  kind: "taylor",
  steps: [1e-2, 1e-3, 1e-4],
  remainders: [1e-2, 1e-3, 1e-4].map((h) => h ** slope),
  scale: 1,
  value: 1,
});
const thrust = blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST });
const withProbes = (...probes: Probe[]): Block => ({ ...thrust, probes });
/** Too large for its Jacobian to be posted. */
const flow = (...probes: Probe[]): Block => ({
  model: "wake.flow",
  output: { name: "field", size: 12_000_000 },
  input: { name: "site", size: 40_000_000 },
  derivative: { method: "ad-reverse" },
  probes,
  sources: ["src/wake/flow.f90"],
});

const read = async (project: SeededProject, path: string): Promise<unknown> => {
  const answer = await server
    .guest()
    .get(`/api/v1/projects/${project.slug}${path}`)
    .set("Authorization", `Bearer ${project.tokens.read}`);
  expect(answer.status, JSON.stringify(answer.body)).toBe(200);
  return answer.body;
};
const send = (project: SeededProject, document: unknown) =>
  server
    .guest()
    .post(`/api/v1/projects/${project.slug}/builds`)
    .set("Authorization", `Bearer ${project.tokens.both}`)
    .send(document as object);

async function postAt(project: SeededProject, n: number, blocks: Block[]): Promise<PostedBuild> {
  const answer = await send(project, buildOf(commitOf(n), blocks));
  expect(answer.status, JSON.stringify(answer.body)).toBe(201);
  return postedBuild.parse(answer.body);
}
const reasons = ({ gate: { reasons: told } }: PostedBuild) => told.map(({ code, message }) => ({ code, message }));

describe("a build with probes", () => {
  let hull: SeededProject;
  let posted: PostedBuild[];
  const ofBuild = (k: number) => posted[k]!.build.id;
  const rowsOf = async (k: number) => page(blockRow).parse(await read(hull, `/builds/${ofBuild(k)}/blocks`)).items;

  beforeAll(async () => {
    hull = await server.seedProject("probed");
    posted = [
      await postAt(hull, 1, [withProbes(dot(1.25), remainder(2)), flow(dot(2, "a"))]),
      await postAt(hull, 2, [withProbes(dot(1.25), remainder(2)), flow(dot(1.25, "a"))]),
      await postAt(hull, 3, [withProbes(dot(1.5), remainder(1)), flow(dot(1.25, "a"))]),
      await postAt(hull, 4, [withProbes(dot(1.25), remainder(2)), flow(dot(1.25, "a"))]),
    ];
  });

  it("counts entries of Jacobians, and probes beside them", () => {
    expect(posted.map(({ summary }) => summary)).toMatchObject([
      {
        blocks: 2,
        entries: 6,
        agrees: 6,
        disagrees: 0,
        probes: { agrees: 2, disagrees: 1, unresolved: 0, invalid: 0 },
      },
      {
        blocks: 2,
        entries: 6,
        agrees: 6,
        disagrees: 0,
        probes: { agrees: 3, disagrees: 0, unresolved: 0, invalid: 0 },
      },
      {
        blocks: 2,
        entries: 6,
        agrees: 6,
        disagrees: 0,
        probes: { agrees: 1, disagrees: 2, unresolved: 0, invalid: 0 },
      },
      {
        blocks: 2,
        entries: 6,
        agrees: 6,
        disagrees: 0,
        probes: { agrees: 3, disagrees: 0, unresolved: 0, invalid: 0 },
      },
    ]);
  });

  it("fails the gate once for each probe that is new, by its name and what it came to", async () => {
    expect(reasons(posted[1]!)).toEqual([]);
    expect(reasons(posted[2]!)).toEqual([
      {
        code: "probe-failed",
        message: expect.stringMatching(
          /^probe taylor: 1 of rotor\.thrust, f by x failed and did not at 0{12}: the directional derivative is off by 1\.0 of its size/,
        ) as string,
      },
      {
        code: "probe-failed",
        message: expect.stringMatching(
          /^probe dot-product: seed 7 of .*: forward and reverse differ by 0\.13 of their size/,
        ) as string,
      },
    ]);
    expect(posted[2]!.gate).toMatchObject({ decision: "fail" });
    expect(posted[2]!.gate.reasons[0]).toMatchObject({ model: "rotor.thrust", block: "f by x", row: 0, column: 0 });
    const since = gate.parse(await read(hull, `/gate?commit=${shaOf(3)}&base=${shaOf(1)}`));
    expect(since.reasons.map(({ code }) => code)).toEqual(["probe-failed", "probe-failed"]);
    expect(posted[3]!.gate).toMatchObject({ decision: "pass", reasons: [] });
  });

  it("has each probe as a block, worst first, with the Jacobian where there is one", async () => {
    const rows = await rowsOf(2);
    expect(rows.map(({ model, probe, rows: r, columns, worst }) => [model, probe, r, columns, worst?.verdict])).toEqual(
      [
        ["rotor.thrust", "taylor: 1", 1, 1, "disagrees"],
        ["rotor.thrust", "dot-product: seed 7", 1, 1, "disagrees"],
        ["rotor.thrust", null, 3, 2, "agrees"],
        ["wake.flow", "dot-product: a", 1, 1, "agrees"],
      ],
    );
  });

  it("tells of a block's probes on its page, and on those of the probes where they belong", async () => {
    const rows = await rowsOf(2);
    const detail = async (probe: string | null) =>
      blockDetail.parse(
        await read(hull, `/builds/${ofBuild(2)}/blocks/${rows.find((row) => row.probe === probe)!.blockId}`),
      );
    const jacobian = await detail(null);
    expect(jacobian).toMatchObject({ probe: null, probeOf: null });
    expect(
      jacobian.probes.map(({ kind, label, verdict, tolerance, slope }) => ({ kind, label, verdict, tolerance, slope })),
    ).toEqual([
      { kind: "dot-product", label: "seed 7", verdict: "disagrees", tolerance: 1e-10, slope: null },
      { kind: "taylor", label: "1", verdict: "disagrees", tolerance: 1e-6, slope: 1 },
    ]);
    const product = await detail("dot-product: seed 7");
    expect(product).toMatchObject({
      probe: "dot-product: seed 7",
      probeOf: jacobian.blockId,
      rows: 1,
      columns: 1,
      derivative: [1.25],
      reference: [1.5],
      verdict: ["disagrees"],
      error: [0.125],
      floor: 2,
      references: [],
    });
    expect(product.probes).toEqual(jacobian.probes);
    expect(product.probes.map(({ blockId }) => blockId)).toContain(product.blockId);
    const alone = await detail("dot-product: a");
    expect(alone).toMatchObject({ probeOf: null, probes: [{ label: "a" }] });
  });

  it("is traced: what probes found is a break, by their names, and it ends", async () => {
    const { items } = page(breakRow).parse(await read(hull, "/breaks?state=all"));
    expect(items.map(({ sentence, state, entryCount, models }) => ({ sentence, state, entryCount, models }))).toEqual([
      {
        sentence: "Two probes of rotor.thrust stopped agreeing here.",
        state: "repaired",
        entryCount: 2,
        models: ["rotor.thrust"],
      },
      {
        sentence: "Probe dot-product: a of wake.flow has disagreed since the first check.",
        state: "repaired",
        entryCount: 1,
        models: ["wake.flow"],
      },
    ]);
    const found = breakDetail.parse(await read(hull, `/breaks/${items[0]!.id}`));
    expect(found.onset.commit).toBe(shaOf(3));
    expect(
      found.entries.map(({ probe, row, column, output, before }) => [probe, row, column, output, before?.verdict]),
    ).toEqual([
      ["taylor: 1", 0, 0, "f", "agrees"],
      ["dot-product: seed 7", 0, 0, "f", "agrees"],
    ]);
  });

  it("has a history for each probe", async () => {
    const block = (await rowsOf(2)).find(({ probe }) => probe === "dot-product: seed 7")!;
    const { items } = page(historyItem).parse(await read(hull, `/blocks/${block.blockId}/entries/0/0/history`));
    expect(items.map(({ verdict, event, motion }) => [verdict, event, motion])).toEqual([
      ["agrees", null, null],
      ["agrees", null, "still"],
      ["disagrees", "break", expect.anything()],
      ["agrees", "repair", expect.anything()],
    ]);
  });

  it("shows a failing probe on strip, lists and overview", async () => {
    const { columns } = strip.parse(await read(hull, "/strip"));
    expect(columns.map(({ verdict, worst }) => [verdict, worst?.probe])).toEqual([
      ["disagrees", "dot-product: a"],
      ["agrees", expect.anything()],
      ["disagrees", "taylor: 1"],
      ["agrees", expect.anything()],
    ]);
    const builds = page(buildRow).parse(await read(hull, "/builds")).items;
    expect(builds.map(({ worstError }) => worstError)[1]).toBeCloseTo(1, 6);
    const seen = overview.parse(await read(hull, `/summary?at=${shaOf(3)}`));
    expect(seen.sentence).toBe("Two probes of rotor.thrust stopped agreeing here.");
    expect(
      seen.models.map(({ model, blocks, counts }) => [model, blocks.length, counts.entries, counts.probes]),
    ).toEqual([
      ["rotor.thrust", 1, 6, { agrees: 0, disagrees: 2, unresolved: 0, invalid: 0 }],
      ["wake.flow", 1, 0, { agrees: 1, disagrees: 0, unresolved: 0, invalid: 0 }],
    ]);
  });
});

describe("the gate", () => {
  it("misses probes only where all of a block are gone, and a block that was only probed as a whole", async () => {
    const project = await server.seedProject("gone");
    const both = withProbes(dot(1.25, "a"), dot(1.25, "b"));
    await postAt(project, 1, [both, flow(dot(1.25, "a"), dot(1.25, "b"))]);
    expect(reasons(await postAt(project, 2, [withProbes(dot(1.25, "c")), flow(dot(1.25, "d"))]))).toEqual([]);
    await postAt(project, 3, [both, flow(dot(1.25, "a"))]);
    expect(reasons(await postAt(project, 4, [thrust]))).toEqual([
      { code: "block-missing", message: "wake.flow, field by site was probed at 000000000000 and is missing here" },
      { code: "reference-missing", message: "all 2 probes of rotor.thrust, f by x are missing since 000000000000" },
    ]);
    await postAt(project, 5, [both]);
    const vanished = await postAt(project, 6, [flow(dot(1.25, "a"))]);
    expect(reasons(vanished).map(({ code }) => code)).toEqual(["block-missing"]);
  });

  it("passes a probe that cannot tell, and fails one that is no number", async () => {
    const project = await server.seedProject("open");
    const blind: Probe = { kind: "taylor", steps: [1e-15, 1e-16], remainders: [1e-17, 1e-17], scale: 1, value: 1 };
    const first = await postAt(project, 1, [flow(blind)]);
    expect(first.summary.probes).toEqual({ agrees: 0, disagrees: 0, unresolved: 1, invalid: 0 });
    expect(reasons(first)).toEqual([]);
    const second = await postAt(project, 2, [flow({ kind: "taylor", steps: [1, 0.5], remainders: ["NaN", 1] })]);
    expect(second.summary.probes.invalid).toBe(1);
    expect(reasons(second)).toEqual([
      {
        code: "probe-failed",
        message: expect.stringMatching(
          /^probe taylor: 1 of wake\.flow.*: a remainder is not a finite number$/,
        ) as string,
      },
    ]);
  });

  const waive = (project: SeededProject, selector: Selector) =>
    server.context.db.write((w) =>
      w.run(
        `INSERT INTO waivers (projectId, state, selector, reason, maxError, expiresAt, askedAt)
         VALUES ($1, 'approved', $2, 'known', 0.2, $3, 0)`,
        [project.project.id, JSON.stringify(selector), Date.now() + 60_000],
      ),
    );

  it.each<[string, Selector]>([
    ["of the block", { model: "rotor.*" }],
    ["of the probe", { model: "rotor.*", probe: "dot-product: *" }],
  ])("lets a waiver %s bear with a probe, up to its bound", async (name, selector) => {
    const project = await server.seedProject(`waived-${name.replaceAll(" ", "-")}`);
    await postAt(project, 1, [withProbes(dot(1.25))]);
    await waive(project, selector);
    expect(reasons(await postAt(project, 2, [withProbes(dot(1.5))]))).toEqual([]);
    expect(reasons(await postAt(project, 3, [withProbes(dot(2))]))).toEqual([
      {
        code: "worse-than-waiver",
        message: expect.stringContaining("probe dot-product: seed 7 of rotor.thrust") as string,
      },
    ]);
  });

  it("hears no waiver of an entry, or of other probes, for a probe", async () => {
    const project = await server.seedProject("other-waiver");
    await postAt(project, 1, [withProbes(dot(1.25))]);
    await waive(project, { model: "rotor.*", rows: [0], columns: [0] });
    await waive(project, { model: "rotor.*", probe: "taylor: *" });
    const gated = await postAt(project, 2, [withProbes(dot(1.5))]);
    expect(reasons(gated).map(({ code }) => code)).toEqual(["probe-failed"]);
  });
});

describe("a posting with a bad probe", () => {
  it("is refused with its place, and nothing of it is kept", async () => {
    const project = await server.seedProject("refused");
    const bad: Probe = { kind: "taylor", steps: [1, 2, 1.5], remainders: [1, 2], scale: 1 };
    const answer = await send(project, buildOf(commitOf(1), [withProbes(dot(1), bad)]));
    expect(answer.status).toBe(422);
    expect((answer.body as { errors: unknown }).errors).toEqual([
      { pointer: "#/blocks/0/probes/1/remainders", detail: "has 2 numbers, expected 3" },
      { pointer: "#/blocks/0/probes/1/steps/2", detail: expect.stringContaining("order") as string },
    ]);
    expect(page(buildRow).parse(await read(project, "/builds")).items).toEqual([]);
    const [{ n } = { n: -1 }] = await server.context.db.select<{ n: number }>(
      "SELECT count(*) AS n FROM blocks WHERE projectId = $1",
      [project.project.id],
    );
    expect(n).toBe(0);
  });

  it("is refused where a shard brings a probe again, and taken where it brings another of the same block", async () => {
    const project = await server.seedProject("sharded");
    const shard = (index: number, blocks: Block[]) =>
      send(project, buildOf(commitOf(1), blocks, { shard: { index, count: 3 } }));
    expect((await shard(0, [flow(dot(1.25, "a"))])).status).toBe(201);
    const twin = await shard(1, [thrust, flow(dot(1.25, "b"), dot(1.25, "a"))]);
    expect(twin.status).toBe(422);
    expect((twin.body as { errors: unknown }).errors).toEqual([
      {
        pointer: "#/blocks/1",
        detail:
          "probe dot-product: a of wake.flow, field by site at nominal came with another shard of this build already",
      },
    ]);
    expect((await shard(1, [thrust, flow(dot(1.25, "b"))])).status).toBe(201);
    const whole = postedBuild.parse((await shard(2, [flow(remainder(2))])).body);
    expect(whole.summary).toMatchObject({ blocks: 2, entries: 6, probes: { agrees: 3 } });
  });
});

describe("the record", () => {
  it("of builds that were summed up before probes were counted is read as having none", async () => {
    const project = await server.seedProject("older");
    const document = buildOf(commitOf(1), [thrust]);
    const first = postedBuild.parse((await send(project, document)).body);
    await server.context.db.write((w) =>
      w.run("UPDATE builds SET summary = json_remove(summary, '$.counts.probes', '$.counts.carried') WHERE id = $1", [
        Number(first.build.id),
      ]),
    );
    const none = { agrees: 0, disagrees: 0, unresolved: 0, invalid: 0 };
    expect(buildRow.parse(await read(project, `/builds/${first.build.id}`)).summary.probes).toEqual(none);
    expect(strip.parse(await read(project, "/strip")).columns[0]?.verdict).toBe("agrees");
    expect(postedBuild.parse((await send(project, document)).body).summary.probes).toEqual(none);
  });

  it("adds nothing but small rows where probes come again as they were", async () => {
    const project = await server.seedProject("again");
    const tables = async () => {
      const rows = await server.context.db.select<{ tiles: number; snapshots: number; blocks: number }>(
        `SELECT (SELECT count(*) FROM tiles) AS tiles, (SELECT count(*) FROM snapshots) AS snapshots,
           (SELECT count(*) FROM blocks) AS blocks`,
      );
      return rows[0];
    };
    await postAt(project, 1, [withProbes(dot(1.25), remainder(2))]);
    // The first build that has one before it tells motions: still.
    await postAt(project, 2, [withProbes(dot(1.25), remainder(2))]);
    const before = await tables();
    await postAt(project, 3, [withProbes(dot(1.25), remainder(2))]);
    expect(await tables()).toEqual(before);
  });
});
