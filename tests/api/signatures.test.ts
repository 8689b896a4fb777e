import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { blockRow } from "../../shared/schemas/block.ts";
import { breakDetail, breakRow } from "../../shared/schemas/break.ts";
import { page } from "../../shared/schemas/common.ts";
import { blockOf, buildOf, commitOf, numbers, post } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

const RIGHT = numbers(4, 3, 2);

let server: TestServer;
let hull: SeededProject;
const builds: string[] = [];
const read = (path: string) =>
  server.guest().get(`/api/v1/projects/hull${path}`).set("Authorization", `Bearer ${hull.tokens.read}`);

/** One build of one block; its derivative is the right one with some entries changed. */
async function build(n: number, change: (value: number, row: number, column: number) => number | "NaN"): Promise<void> {
  const derivative = RIGHT.map((values, row) => values.map((value, column) => change(value, row, column)));
  const block = blockOf({ model: "blade.section", derivative, reference: RIGHT });
  const named = {
    ...block,
    input: { ...block.input, name: "angle", unit: "rad", elements: ["chord", "pitch", "twist"] },
  };
  builds.push((await post(server, hull, buildOf(commitOf(n), [named]))).build.id);
}

beforeAll(async () => {
  server = await startTestServer();
  hull = await server.seedProject("hull", {});
  const degrees = (value: number, column: number) => (column === 1 ? (value * Math.PI) / 180 : value);
  await build(1, (value) => value);
  await build(2, (value, _, column) => degrees(value, column));
  await build(3, (value, row, column) => (row === 3 && column === 0 ? -value : degrees(value, column)));
});
afterAll(() => server.close());

describe("signatures", () => {
  it("stand with the blocks of a build, in a sentence that uses names and units", async () => {
    const blocks = async (at: number) =>
      page(blockRow).parse((await read(`/builds/${builds[at] ?? ""}/blocks`)).body).items;
    expect((await blocks(0))[0]?.signatures).toEqual([]);
    const [signature, ...more] = (await blocks(1))[0]?.signatures ?? [];
    expect(more).toEqual([]);
    expect(signature).toMatchObject({ code: "unit-factor", scope: "column", row: null, column: 1, share: 1 });
    expect(signature?.detail).toBe(
      "Column 1 (pitch) is the reference times 0.0174533, which is π/180: degrees where angle is posted in rad.",
    );
    expect((await blocks(2))[0]?.signatures.map(({ code, scope }) => [code, scope])).toEqual([
      ["unit-factor", "column"],
      ["sign-flipped", "entry"],
    ]);
  });

  it("stand with a break only where they hold some of its entries", async () => {
    const breaks = page(breakRow).parse((await read("/breaks")).body).items;
    const bySize = breaks.toSorted((a, b) => b.entryCount - a.entryCount);
    expect(bySize.map(({ entryCount, signatures }) => [entryCount, signatures.map(({ code }) => code)])).toEqual([
      [4, ["unit-factor"]],
      [1, ["sign-flipped"]],
    ]);
    for (const { id, signatures } of breaks) {
      const detail = breakDetail.parse((await read(`/breaks/${id}`)).body);
      expect(detail.signatures).toEqual(signatures);
    }
  });

  it("of what an earlier server stored are told of the whole block", async () => {
    await server.context.db.write((w) =>
      w.run(
        `UPDATE block_details SET details = json_set(details, '$.signatures', json($1)) WHERE id IN
         (SELECT detailsId FROM build_blocks WHERE buildId = $2)`,
        [JSON.stringify([{ code: "reference-saw-no-change", share: 0.5, detail: "an old one" }]), builds[0] ?? ""],
      ),
    );
    const [block] = page(blockRow).parse((await read(`/builds/${builds[0] ?? ""}/blocks`)).body).items;
    expect(block?.signatures).toEqual([
      {
        code: "reference-saw-no-change",
        scope: "block",
        row: null,
        column: null,
        share: 0.5,
        detail: "an old one",
        alternatives: [],
      },
    ]);
  });
});
