import { afterEach, beforeEach, expect, it } from "vitest";
import { blockRow } from "../../shared/schemas/block.ts";
import { breakDetail } from "../../shared/schemas/break.ts";
import { blockOf, buildOf, commitOf, post, THRUST } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { SeededProject, TestServer } from "../support/server.ts";

let server: TestServer;
let project: SeededProject;
beforeEach(async () => {
  server = await startTestServer();
  project = await server.seedProject("hull", {});
});
afterEach(() => server.close());

const read = async (path: string) => {
  const request = server.guest().get(`/api/v1/projects/hull${path}`);
  const response = await request.set("Authorization", `Bearer ${project.tokens.both}`);
  expect(response.status, JSON.stringify(response.body)).toBe(200);
  return response.body as { items: unknown[] };
};

it("a derivative that the model left behind is named as that, on the block and on the break", async () => {
  const moved = THRUST.map((row, r) => row.map((value, c) => value * (1 + 0.01 * (1 + r + 2 * c))));
  await post(
    server,
    project,
    buildOf(commitOf(1), [blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST })]),
  );
  const posted = await post(
    server,
    project,
    buildOf(commitOf(2), [blockOf({ model: "rotor.thrust", derivative: THRUST, reference: moved })]),
  );
  const found = breakDetail.parse(await read(`/breaks/${posted.breaks[0]?.id}`));
  expect(found.motion).toBe("model-only");
  expect(found.signatures[0]).toMatchObject({ code: "left-behind", share: 1, scope: "block" });
  const [block] = (await read(`/builds/${posted.build.id}/blocks`)).items.map((item) => blockRow.parse(item));
  expect(block?.signatures[0]).toMatchObject({ code: "left-behind", detail: expect.stringContaining("left behind") });
});

it("one that was wrong before as well is not", async () => {
  const wrong = THRUST.map((row) => row.map((value) => 2 * value));
  const moved = THRUST.map((row, r) => row.map((value, c) => value * (1 + 0.01 * (1 + r + 2 * c))));
  await post(
    server,
    project,
    buildOf(commitOf(1), [blockOf({ model: "rotor.thrust", derivative: wrong, reference: THRUST })]),
  );
  const posted = await post(
    server,
    project,
    buildOf(commitOf(2), [blockOf({ model: "rotor.thrust", derivative: wrong, reference: moved })]),
  );
  const [block] = (await read(`/builds/${posted.build.id}/blocks`)).items.map((item) => blockRow.parse(item));
  expect(block?.signatures.map(({ code }) => code)).not.toContain("left-behind");
});
