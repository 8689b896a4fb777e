import { flushPromises } from "@vue/test-utils";
import { describe, expect, it, vi } from "vitest";
import StripChart from "../../src/components/strip/StripChart.vue";
import ProjectFrameView from "../../src/views/ProjectFrameView.vue";
import ProjectListView from "../../src/views/ProjectListView.vue";
import { shaOf, stripFixture } from "./fixtures/history.ts";
import { projectFixture, projectRowFixture } from "./fixtures/record.ts";
import { answerByPath, mountAt } from "./support.ts";

const strip = stripFixture(60);
const judged = strip.columns.findIndex((column, k) => k > 10 && column.buildId !== null);
const unposted = strip.columns.findIndex((column) => column.buildId === null);
const answers = { "/projects/tidewheel": projectFixture(), "/projects/tidewheel/strip": strip };

async function frameAt(address: string, known: Record<string, unknown> = answers) {
  const sent = answerByPath(known);
  const mounted = await mountAt(ProjectFrameView, {}, address);
  await vi.waitFor(() =>
    expect(mounted.wrapper.find("main").text() + mounted.wrapper.html()).not.toContain("Loading the project"),
  );
  await flushPromises();
  return { ...mounted, sent, chart: () => mounted.wrapper.findComponent(StripChart) };
}

describe("the frame of a project", () => {
  it("opens on the project's first lane and stands on the newest judged commit", async () => {
    const { sent, chart } = await frameAt("/projects/tidewheel");
    expect(sent.map((request) => request.path)).toContain("/projects/tidewheel/strip?lane=gcc-release");
    expect(strip.columns[chart().props("at")]!.verdict).not.toBe(null);
  });
  it("takes lane and commit from the address", async () => {
    const { sent, chart } = await frameAt(`/projects/tidewheel?lane=clang-debug&at=${shaOf(5)}`);
    expect(sent.map((request) => request.path)).toContain("/projects/tidewheel/strip?lane=clang-debug");
    expect(chart().props("at")).toBe(5);
  });
  it("writes a move into the address, where back undoes it", async () => {
    const { router, chart } = await frameAt("/projects/tidewheel");
    chart().vm.$emit("move", 7);
    await flushPromises();
    expect(router.currentRoute.value.query.at).toBe(shaOf(7));
    expect(chart().props("at")).toBe(7);
    router.back();
    await vi.waitFor(() => expect(router.currentRoute.value.query.at).toBeUndefined());
  });
  it("follows the cursor from build to build, and to the overview where nothing was posted", async () => {
    const { router, chart } = await frameAt("/projects/tidewheel/builds/b1/blocks/rotor-thrust?layer=motion");
    chart().vm.$emit("move", judged);
    await flushPromises();
    expect(router.currentRoute.value.params).toMatchObject({
      id: strip.columns[judged]!.buildId,
      blockId: "rotor-thrust",
    });
    expect(router.currentRoute.value.query).toEqual({ layer: "motion", at: shaOf(judged) });
    chart().vm.$emit("move", unposted);
    await flushPromises();
    expect(router.currentRoute.value.name).toBe("overview");
    expect(router.currentRoute.value.query.at).toBe(shaOf(unposted));
  });
  it("keeps lane and commit in the links to the other pages", async () => {
    const { wrapper } = await frameAt(`/projects/tidewheel?lane=gcc-release&at=${shaOf(5)}`);
    expect(wrapper.find("nav a[href*=breaks]").attributes("href")).toContain(`at=${shaOf(5)}`);
  });
  it("says so when a commit is not on the strip, and stands elsewhere", async () => {
    const { router } = await frameAt(`/projects/tidewheel?at=${"0".repeat(40)}`);
    await vi.waitFor(() => expect(router.currentRoute.value.query.at).toBeUndefined());
  });
  it("shows blank paper before the first build, and asks for no strip", async () => {
    const { sent, wrapper } = await frameAt("/projects/tidewheel", {
      "/projects/tidewheel": { ...projectFixture(), lanes: [] },
    });
    expect(sent.every((request) => !request.path.includes("strip"))).toBe(true);
    expect(wrapper.find("select").exists()).toBe(false);
  });
  it("hides what the viewer may not do", async () => {
    const viewer = { ...projectFixture(), abilities: {} };
    const { wrapper } = await frameAt("/projects/tidewheel", { ...answers, "/projects/tidewheel": viewer });
    expect(wrapper.find("nav").text()).toContain("Members");
    expect(wrapper.find("nav").text()).not.toContain("Tokens");
  });
  it("shows a project that one may not know of as nothing, with the request's number", async () => {
    const { wrapper } = await frameAt("/projects/secret");
    expect(wrapper.find("h1").text()).toBe("Nothing here.");
    expect(wrapper.text()).toContain("req-404");
    expect(wrapper.find("nav").exists()).toBe(false);
  });
});

describe("the projects", () => {
  it("say where trouble is, in a sentence and a row", async () => {
    answerByPath({ "/projects": { items: [projectRowFixture(strip)], next: null } });
    const { wrapper } = await mountAt(ProjectListView);
    await vi.waitFor(() => expect(wrapper.find("tbody tr").exists()).toBe(true));
    expect(wrapper.find("h1").text()).toBe("One break is open in one project.");
    expect(wrapper.find("tbody").text()).toContain("clang-debug silent");
    expect(wrapper.find("tbody svg[role=img]").attributes("aria-label")).toContain("60 commits");
  });
  it("say what to do when there is none", async () => {
    answerByPath({ "/projects": { items: [], next: null } });
    const { wrapper } = await mountAt(ProjectListView);
    await vi.waitFor(() => expect(wrapper.text()).toContain("A lead invites you"));
  });
});
