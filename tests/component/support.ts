import { enableAutoUnmount, mount } from "@vue/test-utils";
import { PiniaColada } from "@pinia/colada";
import { createPinia, setActivePinia } from "pinia";
import { afterEach } from "vitest";
import type { Component } from "vue";
import { createMemoryHistory, createRouter } from "vue-router";
import type { RouteRecordRaw } from "vue-router";
import { vuetify } from "../../src/plugins/vuetify.ts";

enableAutoUnmount(afterEach);

class StillObserver {
  observe(): void {}
  unobserve(): void {}
  disconnect(): void {}
}

/** What jsdom has not: observers that never fire and a screen that prefers nothing. */
export function standInForBrowser(): void {
  globalThis.ResizeObserver = StillObserver as unknown as typeof ResizeObserver;
  window.matchMedia = ((query: string) => ({
    matches: false,
    media: query,
    addEventListener: () => {},
    removeEventListener: () => {},
  })) as unknown as typeof window.matchMedia;
  HTMLCanvasElement.prototype.getContext = (() => null) as typeof HTMLCanvasElement.prototype.getContext;
}

const blank: Component = { render: () => null };
const named = (name: string, path: string): RouteRecordRaw => ({ name, path, component: blank });
const ROUTES = [
  named("projects", "/"),
  named("sign-in", "/sign-in"),
  named("overview", "/projects/:project"),
  named("breaks", "/projects/:project/breaks"),
  named("break", "/projects/:project/breaks/:id"),
  named("builds", "/projects/:project/builds"),
  named("members", "/projects/:project/members"),
  named("build", "/projects/:project/builds/:id"),
  named("block", "/projects/:project/builds/:id/blocks/:blockId"),
  named("tokens", "/projects/:project/tokens"),
];

/** Mounts a component as the application would, at an address. */
export async function mountAt(component: Component, props: Record<string, unknown> = {}, address = "/") {
  standInForBrowser();
  const pinia = createPinia();
  setActivePinia(pinia);
  const router = createRouter({ history: createMemoryHistory(), routes: ROUTES });
  await router.push(address);
  const wrapper = mount(component, {
    props,
    attachTo: document.body,
    global: { plugins: [pinia, PiniaColada, router, vuetify] },
  });
  return { wrapper, router };
}

export interface Sent {
  readonly method: string;
  readonly path: string;
  readonly headers: Record<string, string>;
  readonly body: unknown;
}
interface Answer {
  readonly status?: number;
  readonly body?: unknown;
  readonly headers?: Record<string, string>;
  /** Sent as it is, with this content type. */
  readonly text?: string;
  readonly type?: string;
}

/** Answers the client's requests in turn from a script; what was sent is kept. */
export function answerWith(...answers: (Answer | "no network")[]): Sent[] {
  const sent: Sent[] = [];
  globalThis.fetch = async (input, init) => {
    const answer = answers[sent.length] ?? { status: 500 };
    sent.push({
      method: init?.method ?? "GET",
      path: String(input),
      headers: { ...(init?.headers as Record<string, string>) },
      body: init?.body === undefined ? undefined : JSON.parse(String(init.body)),
    });
    if (answer === "no network") throw new TypeError("Failed to fetch");
    const { status = 200, body, headers = {}, text, type } = answer;
    const told = type ?? (status >= 400 ? "application/problem+json" : "application/json");
    const content = status === 204 ? null : (text ?? JSON.stringify(body ?? {}));
    return new Response(content, { status, headers: { "Content-Type": told, ...headers } });
  };
  return sent;
}

/** Answers by path below /api/v1: the longest key that the path begins with wins; all else is 404. */
export function answerByPath(answers: Readonly<Record<string, unknown>>): Sent[] {
  const sent: Sent[] = [];
  globalThis.fetch = async (input, init) => {
    const path = String(input).replace("/api/v1", "");
    const body = init?.body === undefined ? undefined : JSON.parse(String(init.body));
    sent.push({ method: init?.method ?? "GET", path, headers: {}, body });
    const key = Object.keys(answers)
      .filter((known) => path.startsWith(known))
      .sort((a, b) => b.length - a.length)[0];
    const status = key === undefined ? 404 : 200;
    const type = key === undefined ? "application/problem+json" : "application/json";
    const answer = key === undefined ? { title: "Nothing here", status, instance: "req-404" } : answers[key];
    return new Response(JSON.stringify(answer), { status, headers: { "Content-Type": type } });
  };
  return sent;
}
