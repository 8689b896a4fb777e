import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { blockRow } from "../../shared/schemas/block.ts";
import { gate } from "../../shared/schemas/gate.ts";
import { overview } from "../../shared/schemas/project.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import { blockOf, buildOf, commitOf, post, shaOf, TENSION, THRUST } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

type Block = BuildDocument["blocks"][number];
type Reference = NonNullable<Block["references"]>[number];

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.close());

const thrust = blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST });
const tension = blockOf({ model: "mooring.tension", derivative: TENSION, reference: TENSION });
const [exact] = thrust.references as [Reference];
const unchecked: Block = { ...thrust, model: "wake.deficit", references: [] };

/** The block's reference as a forward difference whose step is far too small to see 1e-6. */
function blurred({ references }: Block): Reference {
  const [own] = references as [Reference];
  return { ...own, method: "forward-difference", step: 1e-12 };
}

const read = (project: SeededProject, path: string) =>
  server.guest().get(`/api/v1/projects/${project.slug}${path}`).set("Authorization", `Bearer ${project.tokens.read}`);
const summaryOf = async (project: SeededProject, n: number) =>
  overview.parse((await read(project, `/summary?at=${shaOf(n)}`)).body);
const gateOf = async (project: SeededProject, n: number) =>
  gate.parse((await read(project, `/gate?commit=${shaOf(n)}`)).body);
const codesOf = (answer: Awaited<ReturnType<typeof gateOf>>) => answer.reasons.map(({ code }) => code);
const blocksOf = async (project: SeededProject, build: string) => {
  const { items } = (await read(project, `/builds/${build}/blocks`)).body as { items: unknown[] };
  return items.map((item) => blockRow.parse(item));
};

describe("the resolution of a commit", () => {
  it("is told of the project and of each model", async () => {
    const bow = await server.seedProject("bow");
    await post(server, bow, buildOf(commitOf(1), [thrust, { ...tension, references: [blurred(tension)] }]));
    const answer = await summaryOf(bow, 1);
    expect(answer.resolution).toMatchObject({ resolvedShare: 0.6, at: answer.rtol });
    const models = new Map(answer.models.map((row) => [row.model, row]));
    expect(models.get("rotor.thrust")).toMatchObject({ resolvedShare: 1, checkedShare: 1 });
    expect(models.get("mooring.tension")).toMatchObject({ resolvedShare: 0, checkedShare: 1 });
    expect(models.get("rotor.thrust")?.resolution).toBeLessThan(1e-14);
    const weakest = models.get("mooring.tension")?.resolution ?? 0;
    expect(weakest).toBeGreaterThan(1e-6);
    expect(answer.resolution?.weakest).toBe(weakest);
    const atRtol = answer.resolutionCurve.findLast(({ rtol }) => rtol <= answer.rtol);
    expect(atRtol?.share).toBe(answer.resolution?.resolvedShare);
  });

  it("counts entries whose differences saw no change as told, and is null without a build", async () => {
    const keel = await server.seedProject("keel");
    const zeros = [
      [0, 0],
      [0, 1],
    ];
    const sparse: Block = {
      ...blockOf({ model: "sparse", derivative: zeros, reference: zeros }),
      references: [{ method: "forward-difference", step: 1e-6, values: zeros }],
    };
    await post(server, keel, buildOf(commitOf(1), [sparse]));
    const [row] = (await summaryOf(keel, 1)).models;
    expect(row?.counts.agrees).toBeGreaterThanOrEqual(3);
    expect(row?.resolvedShare).toBeGreaterThanOrEqual(0.75);
    const empty = await server.seedProject("empty");
    expect(overview.parse((await read(empty, "/summary")).body).resolution).toBeNull();
  });
});

describe("what a reference no longer tells, at the gate", () => {
  it("resolution-lost, reference-missing and block-missing, each at the commit that brought it", async () => {
    const mast = await server.seedProject("mast");
    await post(server, mast, buildOf(commitOf(1), [thrust, tension]));
    await post(server, mast, buildOf(commitOf(2), [{ ...thrust, references: [blurred(thrust)] }, tension]));
    await post(server, mast, buildOf(commitOf(3), [thrust, tension]));
    // Known entries carry their verdicts on for a while: a block that is new misses its reference at once.
    await post(server, mast, buildOf(commitOf(4), [thrust, tension, unchecked]));
    await post(server, mast, buildOf(commitOf(5), [thrust, unchecked]));
    expect(codesOf(await gateOf(mast, 1))).toEqual([]);
    const lost = await gateOf(mast, 2);
    expect(codesOf(lost)).toEqual(["resolution-lost"]);
    expect(lost).toMatchObject({ decision: "pass", base: shaOf(1) });
    expect(lost.reasons[0]).toMatchObject({ severity: "warn", model: "rotor.thrust", block: "f by x" });
    expect(codesOf(await gateOf(mast, 3))).toEqual([]);
    expect(codesOf(await gateOf(mast, 4))).toEqual(["reference-missing"]);
    const gone = await gateOf(mast, 5);
    expect(gone.decision).toBe("fail");
    expect(codesOf(gone)).toEqual(["block-missing"]);
    expect(gone.reasons[0]).toMatchObject({ severity: "fail", model: "mooring.tension" });
  });

  it("references that conflict leave entries unresolved, say so on the block, and count as resolution lost", async () => {
    const stern = await server.seedProject("stern");
    await post(server, stern, buildOf(commitOf(1), [thrust]));
    const off = THRUST.map((values, r) => values.map((value, c) => (r === 0 && c === 0 ? value * 1.01 : value)));
    const second: Reference = { method: "ad-forward", values: off };
    const posted = await post(server, stern, buildOf(commitOf(2), [{ ...thrust, references: [exact, second] }]));
    const [row] = await blocksOf(stern, posted.build.id);
    expect(row?.counts).toMatchObject({ agrees: 5, unresolved: 1 });
    expect(row?.signatures).toEqual([
      expect.objectContaining({ code: "references-conflict", detail: expect.stringContaining("one entry") }),
    ]);
    expect((await summaryOf(stern, 2)).resolution?.resolvedShare).toBeCloseTo(5 / 6, 12);
    expect(codesOf(await gateOf(stern, 2))).toEqual(["resolution-lost"]);
    await post(server, stern, buildOf(commitOf(3), [thrust]));
    expect(codesOf(await gateOf(stern, 3))).toEqual([]);
  });
});
