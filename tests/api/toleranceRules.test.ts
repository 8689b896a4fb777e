import { afterAll, beforeAll, expect, it } from "vitest";
import { postedBuild } from "../../shared/schemas/build.ts";
import { project as projectSchema } from "../../shared/schemas/project.ts";
import { startTestServer } from "../support/server.ts";
import type { Agent, SeededProject, TestServer } from "../support/server.ts";

let server: TestServer;
let hull: SeededProject;
let lead: Agent;
beforeAll(async () => {
  server = await startTestServer();
  hull = await server.seedProject("hull", { "lead@example.org": "lead", "dev@example.org": "developer" });
  lead = await server.agent("lead@example.org");
});
afterAll(() => server.close());

/** One block whose derivative is wrong by 1e-5, with a reference that knows better. */
async function post(run: string, model: string) {
  const response = await server
    .guest()
    .post("/api/v1/projects/hull/builds")
    .set("Authorization", `Bearer ${hull.tokens.post}`)
    .send({
      format: "clinograph.build/1",
      commit: { sha: "b".repeat(40) },
      run: { id: run },
      blocks: [
        {
          model,
          output: { name: "f", size: 1 },
          input: { name: "x", size: 1 },
          derivative: { method: "analytic", values: [[1.00001]] },
          references: [{ method: "high-precision", values: [[1]] }],
        },
      ],
    });
  return postedBuild.parse(response.body).summary;
}

it("judges the blocks that a rule names by the rule, and the others by the project's tolerances", async () => {
  expect(await post("1", "rotor.thrust")).toMatchObject({ disagrees: 1 });
  const rules = [{ selector: { model: "rotor.*" }, rtol: 1e-4 }];
  const patched = await lead.patch("/api/v1/projects/hull").send({ toleranceRules: rules });
  expect(projectSchema.parse(patched.body).toleranceRules).toEqual(rules);
  expect(await post("2", "rotor.thrust")).toMatchObject({ agrees: 1 });
  expect(await post("3", "wake.deficit")).toMatchObject({ disagrees: 1 });
  await lead.patch("/api/v1/projects/hull").send({ toleranceRules: [] });
  expect(await post("4", "rotor.thrust")).toMatchObject({ disagrees: 1 });
});

it("takes rules from leads only, for whole blocks only", async () => {
  const developer = await server.agent("dev@example.org");
  const rule = { selector: { model: "rotor.*" }, rtol: 1e-4 };
  expect((await developer.patch("/api/v1/projects/hull").send({ toleranceRules: [rule] })).status).toBe(403);
  const byRow = { ...rule, selector: { model: "rotor.*", rows: [1] } };
  const refused = await lead.patch("/api/v1/projects/hull").send({ toleranceRules: [byRow] });
  expect(refused.status).toBe(422);
  expect(refused.body.errors[0].pointer).toBe("#/toleranceRules/0/selector/rows");
});
