import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { breakDetail, breakRow, comment } from "../../shared/schemas/break.ts";
import type { BreakDetail } from "../../shared/schemas/break.ts";
import { strip } from "../../shared/schemas/commit.ts";
import { page } from "../../shared/schemas/common.ts";
import { overview } from "../../shared/schemas/project.ts";
import { wanted, wantedItem } from "../../shared/schemas/wanted.ts";
import { AuditEntry } from "../../server/db/models/AuditEntry.ts";
import { Waiver } from "../../server/db/models/Waiver.ts";
import { BROKEN, THRUST, blockOf, buildOf, commitOf, flipped, post, postStory, shaOf } from "../support/hull.ts";
import { startTestServer } from "../support/server.ts";
import type { Agent, SeededProject, TestServer } from "../support/server.ts";

let server: TestServer;
let hull: SeededProject;
let developer: Agent;
let builds: Awaited<ReturnType<typeof postStory>>;
const api = (path: string) => `/api/v1/projects/hull${path}`;
const read = (path: string) => server.guest().get(api(path)).set("Authorization", `Bearer ${hull.tokens.read}`);

beforeAll(async () => {
  server = await startTestServer();
  hull = await server.seedProject("hull", { "dev@example.org": "developer", "eye@example.org": "viewer" });
  await server.seedProject("keel", { "other@example.org": "developer" });
  developer = await server.agent("dev@example.org");
  builds = await postStory(server, hull);
});
afterAll(() => server.close());

async function listed(query = "") {
  const response = await read(`/breaks${query}`);
  expect(response.status).toBe(200);
  return page(breakRow).parse(response.body);
}

async function detail(id: string): Promise<BreakDetail> {
  const response = await read(`/breaks/${id}`);
  expect(response.status).toBe(200);
  return breakDetail.parse(response.body);
}

async function openBreak(): Promise<BreakDetail> {
  return detail((await listed()).items[0]?.id ?? "");
}

describe("breaks", () => {
  it("are listed by state, with a sentence that a person would write", async () => {
    const open = (await listed()).items;
    expect(open).toHaveLength(1);
    expect(open[0]).toMatchObject({
      state: "open",
      lane: "default",
      onset: { commit: shaOf(4), buildId: builds[4] },
      onsetSubject: "Commit 4",
      onsetAuthor: "Ada",
      lastGood: { commit: shaOf(1), buildId: builds[1] },
      kind: "after-good",
      suspectCount: 3,
      entryCount: 3,
      models: ["rotor.thrust"],
      motion: "derivative-only",
      repairedBy: null,
      assignee: null,
      sentence: "Three partials of rotor.thrust stopped agreeing here.",
    });
    expect(open[0]?.worstError).toBeCloseTo(2, 12);
    const repaired = (await listed("?state=repaired")).items;
    expect(repaired).toHaveLength(1);
    expect(repaired[0]).toMatchObject({
      state: "repaired",
      onset: { commit: shaOf(5), buildId: builds[5] },
      repairedBy: { commit: shaOf(7), buildId: builds[7] },
      worstError: null,
      sentence: "One partial of mooring.tension became NaN or infinite here.",
    });
    expect((await listed("?state=all")).items).toHaveLength(2);
    expect((await listed("?state=all&lane=other")).items).toHaveLength(0);
  });

  it("come in pages that miss none", async () => {
    const first = await listed("?state=all&limit=1");
    expect(first.next).not.toBeNull();
    const second = await listed(`?state=all&limit=1&cursor=${first.next ?? ""}`);
    expect(second.next).toBeNull();
    const all = (await listed("?state=all")).items.map((row) => row.id);
    expect([...first.items, ...second.items].map((row) => row.id)).toEqual(all);
  });

  it("tell their entries before and after, worst first", async () => {
    const one = await openBreak();
    expect(one.entries.map((entry) => [entry.row, entry.column]).sort()).toEqual(BROKEN.map((entry) => [...entry]));
    const errors = one.entries.map((entry) => Number(entry.error));
    expect(errors).toEqual(errors.toSorted((a, b) => b - a));
    for (const { row, column, derivative, reference, verdict, before } of one.entries) {
      const right = THRUST[row]?.[column] ?? NaN;
      expect({ derivative, reference, verdict }).toEqual({
        derivative: -right,
        reference: right,
        verdict: "disagrees",
      });
      expect(before).toMatchObject({
        commit: shaOf(1),
        buildId: builds[1],
        derivative: right,
        reference: right,
        error: 0,
        verdict: "agrees",
      });
    }
  });

  it("name their suspects, most likely first, and the commit to build next", async () => {
    const one = await openBreak();
    expect(one.suspects.map((suspect) => suspect.commit).sort()).toEqual([2, 3, 4].map(shaOf));
    const guilty = one.suspects[0];
    expect(guilty).toMatchObject({ commit: shaOf(3), subject: "Commit 3", changedPaths: ["src/rotor/thrust.f90"] });
    expect(guilty?.why.length).toBeGreaterThan(0);
    const scores = one.suspects.map((suspect) => suspect.score);
    expect(scores).toEqual(scores.toSorted((a, b) => b - a));
    expect(scores.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 12);
    expect(one.nextTest?.remainingAfter).toBe(2);
    expect([shaOf(2), shaOf(3)]).toContain(one.nextTest?.commit);
    expect(guilty?.url).toBeNull();
    await server.context.db.write((w) =>
      w.run("UPDATE projects SET commitUrl = 'https://code.example.org/{sha}' WHERE slug = 'hull'"),
    );
    expect((await openBreak()).suspects[0]?.url).toBe(`https://code.example.org/${shaOf(3)}`);
  });

  it("are not found under another project or a number that is none", async () => {
    const { id } = await openBreak();
    expect((await read("/breaks/999999")).status).toBe(404);
    expect((await read("/breaks/nonsense")).status).toBe(404);
    const other = await server.agent("other@example.org");
    expect((await other.get(`/api/v1/projects/keel/breaks/${id}`)).status).toBe(404);
    expect((await other.get(api(`/breaks/${id}`))).status).toBe(404);
    expect((await server.guest().get(api("/breaks"))).status).toBe(401);
  });
});

describe("who sees to a break", () => {
  it("is a member, is on record, and can be taken back", async () => {
    const { id, number } = await openBreak();
    const [person] = await server.context.db.select<{ id: number }>(
      "SELECT id FROM users WHERE email = 'dev@example.org'",
    );
    const assignee = String(person?.id);
    const set = await developer.patch(api(`/breaks/${id}`)).send({ assignee });
    expect(set.status).toBe(200);
    expect(breakDetail.parse(set.body).assignee).toEqual({ id: assignee, name: "dev" });
    expect((await listed()).items[0]?.assignee).toEqual({ id: assignee, name: "dev" });
    const entry = await AuditEntry.findOne({ where: { action: "break.assign" } });
    expect([entry?.target, entry?.actorName, JSON.parse(entry?.detail ?? "null")]).toEqual([
      `break ${number}`,
      "dev",
      { assignee: "dev" },
    ]);
    const back = await developer.patch(api(`/breaks/${id}`)).send({ assignee: null });
    expect(breakDetail.parse(back.body).assignee).toBeNull();
  });

  it("is nobody from outside", async () => {
    const { id } = await openBreak();
    const [stranger] = await server.context.db.select<{ id: number }>(
      "SELECT id FROM users WHERE email = 'other@example.org'",
    );
    const response = await developer.patch(api(`/breaks/${id}`)).send({ assignee: String(stranger?.id) });
    expect(response.status).toBe(422);
    expect(response.body.errors).toEqual([{ pointer: "#/assignee", detail: "is no member of this project" }]);
    expect((await openBreak()).assignee).toBeNull();
    expect((await developer.patch(api(`/breaks/${id}`)).send({ asignee: null })).status).toBe(422);
  });

  it("is not for viewers to say", async () => {
    const { id } = await openBreak();
    const viewer = await server.agent("eye@example.org");
    expect((await viewer.patch(api(`/breaks/${id}`)).send({ assignee: null })).status).toBe(403);
    expect((await viewer.post(api(`/breaks/${id}/comments`)).send({ body: "hm" })).status).toBe(403);
    expect(breakDetail.parse((await viewer.get(api(`/breaks/${id}`))).body).abilities).toMatchObject({
      "break.assign": false,
      "break.comment": false,
    });
    expect(breakDetail.parse((await developer.get(api(`/breaks/${id}`))).body).abilities).toMatchObject({
      "break.assign": true,
      "break.comment": true,
      "waiver.decide": false,
    });
  });
});

describe("comments", () => {
  it("are kept in order under their author's name", async () => {
    const { id } = await openBreak();
    const said = await developer.post(api(`/breaks/${id}/comments`)).send({ body: "  Looks like a sign.  " });
    expect(said.status).toBe(201);
    expect(comment.parse(said.body)).toMatchObject({ body: "Looks like a sign.", author: { name: "dev" } });
    await developer.post(api(`/breaks/${id}/comments`)).send({ body: "Fixed soon." });
    expect((await openBreak()).comments.map(({ body }) => body)).toEqual(["Looks like a sign.", "Fixed soon."]);
    expect(await AuditEntry.count({ where: { action: "break.comment" } })).toBe(2);
    expect((await developer.post(api(`/breaks/${id}/comments`)).send({ body: "   " })).status).toBe(422);
  });
});

describe("a break that is waived", () => {
  const waive = (selector: object, maxError: number, expiresAt: number) =>
    server.context.db.write((w) =>
      w.create(Waiver, {
        projectId: hull.project.id,
        state: "approved",
        selector: JSON.stringify(selector),
        reason: "known, until the new thrust model is in",
        maxError,
        expiresAt,
        askedAt: Date.now(),
      }),
    );
  const soon = () => Date.now() + 60_000;

  it("needs waivers for all of its entries, wide enough and not past their end", async () => {
    const states = async () => (await listed("?state=all")).items.map((row) => row.state).sort();
    await waive({ model: "rotor.*" }, 1.5, soon());
    expect(await states()).toEqual(["open", "repaired"]);
    await waive({ model: "rotor.*" }, 10, Date.now() - 1);
    expect(await states()).toEqual(["open", "repaired"]);
    await waive({ model: "rotor.*", rows: [0, 1] }, 10, soon());
    expect(await states()).toEqual(["open", "repaired"]);
    const last = await waive({ model: "rotor.*", rows: [2] }, 10, soon() - 30_000);
    expect(await states()).toEqual(["repaired", "waived"]);
    expect((await listed("?state=open")).items).toHaveLength(0);
    const [row] = (await listed("?state=waived")).items;
    expect((await detail(row?.id ?? "")).waiver).toMatchObject({ id: String(last.id), maxError: 10 });
    await server.context.db.write((w) => w.run("DELETE FROM waivers"));
    expect(await states()).toEqual(["open", "repaired"]);
  });

  it("is open nowhere: not in the overview, on the strip, in the list of projects or in what is wanted", async () => {
    const open = async () => {
      const overviewed = overview.parse((await read("/summary")).body).openBreaks.length;
      const bracketed = strip.parse((await read("/strip")).body).brackets.length;
      const halving = wanted.parse((await read("/wanted")).body).items.filter((one) => one.breakIds.length > 0).length;
      const projects = (await developer.get("/api/v1/projects")).body as { items: { openBreaks: number }[] };
      return [overviewed, bracketed, halving, projects.items[0]?.openBreaks];
    };
    expect(await open()).toEqual([1, 1, 1, 1]);
    await waive({ model: "rotor.*" }, 10, soon());
    expect(await open()).toEqual([0, 0, 0, 0]);
    await server.context.db.write((w) => w.run("DELETE FROM waivers"));
  });
});

describe("what should be built next", () => {
  async function items() {
    const response = await read("/wanted");
    expect(response.status).toBe(200);
    return wanted.parse(response.body).items;
  }

  it("halves the suspects of the open break", async () => {
    const one = await openBreak();
    expect(await items()).toEqual([
      { ...one.nextTest, lane: "default", reason: "halves-suspects", breakIds: [one.id] },
    ]);
  });

  it("is what a developer asks for, until it is built", async () => {
    const ask = (n: number, lane = "default") => developer.post(api("/wanted")).send({ commit: shaOf(n), lane });
    const asked = await ask(8);
    expect(asked.status).toBe(201);
    expect(wantedItem.parse(asked.body)).toMatchObject({ commit: shaOf(8), reason: "requested" });
    expect((await ask(8)).status).toBe(201);
    expect((await items()).filter((item) => item.commit === shaOf(8))).toHaveLength(1);
    expect(await AuditEntry.count({ where: { action: "wanted.ask" } })).toBe(1);
    expect((await ask(99)).status).toBe(404);
    expect((await ask(8, "nowhere")).status).toBe(404);
    expect((await ask(4)).status).toBe(409);
    await post(
      server,
      hull,
      buildOf(commitOf(8), [blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST })]),
    );
    expect((await items()).filter((item) => item.commit === shaOf(8))).toHaveLength(0);
  });
});

describe("a break that turns out to be part of another", () => {
  it("is answered with that other one, which keeps what was said of it", async () => {
    const parted = await server.seedProject("fin", { "dev@example.org": "developer" });
    const thrust = (derivative: number[][]) => [blockOf({ model: "rotor.thrust", derivative, reference: THRUST })];
    const bad = flipped(THRUST, BROKEN);
    const token = (path: string) =>
      server.guest().get(`/api/v1/projects/fin${path}`).set("Authorization", `Bearer ${parted.tokens.read}`);
    const history = [2, 3, 4, 5].map((n) => commitOf(n));
    await post(server, parted, buildOf(commitOf(1), thrust(THRUST), { history }));
    const one = flipped(THRUST, BROKEN.slice(0, 1));
    await post(server, parted, buildOf(commitOf(3), thrust(one)));
    await post(server, parted, buildOf(commitOf(5), thrust(bad)));
    const ids = page(breakRow)
      .parse((await token("/breaks")).body)
      .items.map((row) => row.id);
    expect(ids).toHaveLength(2);
    for (const id of ids) {
      const said = await developer.post(`/api/v1/projects/fin/breaks/${id}/comments`).send({ body: `of ${id}` });
      expect(said.status).toBe(201);
    }
    // A second run of commit 3 finds all three entries bad: they broke together.
    await post(
      server,
      parted,
      buildOf(commitOf(3), thrust(bad), { run: { id: "again", finishedAt: "2027-01-01T00:00:00Z" } }),
    );
    const [left, ...none] = page(breakRow).parse((await token("/breaks")).body).items;
    expect(none).toEqual([]);
    expect(left?.entryCount).toBe(3);
    for (const id of ids) {
      const answer = breakDetail.parse((await token(`/breaks/${id}`)).body);
      expect(answer.id).toBe(left?.id);
      expect(answer.comments.map(({ body }) => body).sort()).toEqual(ids.map((said) => `of ${said}`).sort());
    }
    expect(ids).toContain(left?.id);
  });
});
