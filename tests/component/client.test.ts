import { createPinia, setActivePinia } from "pinia";
import { beforeEach, describe, expect, it, vi } from "vitest";
import { createMemoryHistory, createRouter } from "vue-router";
import { apiPath, client, onSessionEnded, setCsrfToken } from "../../src/api/client.ts";
import { ApiProblem, asProblem } from "../../src/api/problem.ts";
import { everyPage } from "../../src/queries/everyPage.ts";
import { safeNext, signInAgain } from "../../src/router/signInAgain.ts";
import { useNoticesStore } from "../../src/stores/notices.ts";
import { useSessionStore } from "../../src/stores/session.ts";
import { answerWith } from "./support.ts";

const ended = vi.fn();
const session = {
  user: { id: "1", name: "I. Sorel", email: "sorel@tidewheel.example", admin: false },
  csrfToken: "c5rf",
};
const caught = async (work: Promise<unknown>) => {
  const error: unknown = await work.catch((thrown: unknown) => thrown);
  expect(error).toBeInstanceOf(ApiProblem);
  return error as ApiProblem;
};

beforeEach(() => {
  setActivePinia(createPinia());
  setCsrfToken(null);
  ended.mockReset();
  onSessionEnded(ended);
});

describe("the client", () => {
  it("builds addresses and leaves out what is not asked", () => {
    expect(apiPath("/projects/a/strip", { lane: "gcc 12", at: null, x: undefined, y: "" })).toBe(
      "/api/v1/projects/a/strip?lane=gcc+12",
    );
  });
  it("shows the token with writes and not with reads", async () => {
    setCsrfToken("c5rf");
    const sent = answerWith({ body: {} }, { status: 201, body: {} }, { status: 204 });
    await client.get("/projects");
    await client.post("/projects", { slug: "a" });
    await client.remove("/projects/a/tokens/1");
    expect(sent.map((s) => s.headers["X-CSRF-Token"])).toEqual([undefined, "c5rf", "c5rf"]);
    expect(sent[1]!.body).toEqual({ slug: "a" });
  });
  it("turns a problem document into a problem with its request and fields", async () => {
    answerWith({
      status: 422,
      body: {
        type: "/problems/invalid",
        title: "Not a valid document",
        status: 422,
        instance: "req-1",
        errors: [{ pointer: "#/scopes/0", detail: "is unknown" }],
      },
    });
    const problem = await caught(client.post("/x", {}));
    expect([problem.status, problem.title, problem.requestId]).toEqual([422, "Not a valid document", "req-1"]);
    expect(problem.fieldError("scopes")).toBe("is unknown");
    expect(problem.fieldError("scope")).toBeUndefined();
  });
  it("makes sense of an answer that is no problem document", async () => {
    answerWith({ status: 502, text: "<html>bad gateway</html>", type: "text/html" });
    expect((await caught(client.get("/x"))).title).toBe("The server answered 502");
    answerWith({ status: 503, text: "{not json", type: "application/json", headers: { "Retry-After": "7" } });
    const draining = await caught(client.get("/x"));
    expect([draining.status, draining.retryAfter]).toEqual([503, 7]);
  });
  it("says that the server did not answer", async () => {
    answerWith("no network");
    expect((await caught(client.get("/x"))).status).toBe(0);
    expect(asProblem(new Error("odd")).detail).toBe("odd");
  });
  it("tells of a session's end on 401, except where 401 is an answer", async () => {
    answerWith({ status: 401 }, { status: 401 });
    await caught(client.get("/projects"));
    expect(ended).toHaveBeenCalledTimes(1);
    await caught(client.post("/session", {}, { expectSignedOut: true }));
    expect(ended).toHaveBeenCalledTimes(1);
  });
  it("reads a list page after page", async () => {
    const sent = answerWith({ body: { items: [1, 2], next: "n" } }, { body: { items: [3], next: null } });
    expect(await everyPage<number>("/list", { query: { lane: "a" } })).toEqual([1, 2, 3]);
    expect(sent[1]!.path).toBe("/api/v1/list?lane=a&limit=500&cursor=n");
  });
});

describe("the session", () => {
  it("knows who is signed in, and lets the client show the token", async () => {
    const store = useSessionStore();
    const sent = answerWith({ body: session }, { status: 201 });
    await store.signIn("sorel@tidewheel.example", "correct horse battery");
    expect(store.user?.name).toBe("I. Sorel");
    await client.post("/x", {});
    expect(sent[1]!.headers["X-CSRF-Token"]).toBe("c5rf");
  });
  it("takes 401 for signed out and anything else for trouble", async () => {
    const store = useSessionStore();
    answerWith({ status: 401 });
    await store.load();
    expect([store.known, store.signedIn]).toEqual([true, false]);
    expect(ended).not.toHaveBeenCalled();
    answerWith({ status: 500 });
    await caught(store.load());
  });
  it("forgets the person and the token on sign-out", async () => {
    const store = useSessionStore();
    store.take(session);
    const sent = answerWith({ status: 204 }, { body: {} });
    await store.signOut();
    await client.post("/x", {});
    expect(store.signedIn).toBe(false);
    expect(sent.map((s) => s.headers["X-CSRF-Token"])).toEqual(["c5rf", undefined]);
  });
  it("stays signed in when the server did not hear of the sign-out", async () => {
    const store = useSessionStore();
    store.take(session);
    answerWith("no network");
    await caught(store.signOut());
    expect(store.signedIn).toBe(true);
  });
});

describe("an ended session", () => {
  const blank = { render: () => null };
  it("goes to the sign-in once and remembers the place", async () => {
    const router = createRouter({
      history: createMemoryHistory(),
      routes: [
        { path: "/projects/:project", component: blank },
        { path: "/sign-in", name: "sign-in", component: blank },
      ],
    });
    await router.push("/projects/tidewheel?at=abc&lane=x");
    useSessionStore().take(session);
    signInAgain(router);
    signInAgain(router);
    await vi.waitFor(() => expect(router.currentRoute.value.name).toBe("sign-in"));
    expect(router.currentRoute.value.query.next).toBe("/projects/tidewheel?at=abc&lane=x");
    expect(useNoticesStore().items).toHaveLength(1);
  });
  it("comes back only to an address of this application", () => {
    expect(safeNext("/projects/a?at=1")).toBe("/projects/a?at=1");
    for (const bad of ["https://evil.example", "//evil.example", "/\\evil.example", undefined, ["/a"]]) {
      expect(safeNext(bad)).toBe("/");
    }
  });
});
