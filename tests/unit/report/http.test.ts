import { afterEach, describe, expect, it } from "vitest";
import { ReportError } from "../../../scripts/report/exit.ts";
import { backOffMs, retryAfterMs, send } from "../../../scripts/report/http.ts";
import { fakeServer } from "./support/fakeServer.ts";
import type { FakeServer, Reply } from "./support/fakeServer.ts";

let server: FakeServer | null = null;
afterEach(() => server?.close());

/** Posts to a server that answers in turn, the last answer again and again. */
async function postTo(replies: readonly Reply[], patienceMs = 60_000) {
  server = await fakeServer((_, at) => replies[Math.min(at, replies.length - 1)]!);
  const told: string[] = [];
  const pauses: number[] = [];
  const request = { method: "POST", url: server.url, headers: {}, body: Buffer.from('{"a":1}') } as const;
  const onRetry = (reason: string, delayMs: number) => {
    told.push(reason);
    pauses.push(delayMs);
  };
  const answer = await send(request, { patienceMs, onRetry });
  return { answer, told, pauses, received: server.received };
}

const AT_ONCE = { "Retry-After": "0" };
const GOOD: Reply = { status: 201, body: { fine: true } };

describe("sending", () => {
  it.each([429, 502, 503, 504])("tries again after %i, with the same bytes", async (status) => {
    const busy = { status, headers: AT_ONCE, body: { detail: "too busy" } };
    const { answer, told, pauses, received } = await postTo([busy, busy, GOOD]);
    expect(answer).toMatchObject({ status: 201, body: { fine: true } });
    // "At once" is still not all at the same time.
    for (const pause of pauses) expect(pause).toBeGreaterThanOrEqual(250);
    expect(told).toEqual(Array(2).fill(`the server answers ${status} (too busy)`));
    expect(received.map(({ bytes }) => bytes.toString())).toEqual(Array(3).fill('{"a":1}'));
  });

  it("tries again after a connection that was cut", async () => {
    const { answer, told } = await postTo([{ status: 0, cut: true }, GOOD]);
    expect(answer.status).toBe(201);
    expect(told[0]).toMatch(/cannot reach http/);
  });

  it.each([400, 401, 403, 404, 409, 413, 415, 422, 500, 307])("takes %i for an answer", async (status) => {
    const { answer, received } = await postTo([{ status, headers: { Location: "/x" } }]);
    expect(answer.status).toBe(status);
    expect(received).toHaveLength(1);
  });

  it("gives up when patience is over, or when it is asked to come back later than that", async () => {
    await expect(postTo([{ status: 503 }], 0)).rejects.toThrow(/Gave up after 1 attempts.*503/);
    await server?.close();
    const later = postTo([{ status: 429, headers: { "Retry-After": "120" } }], 1000);
    await expect(later).rejects.toThrow(ReportError);
  });
});

describe("pauses", () => {
  it("double, with jitter, up to half a minute", () => {
    expect([0, 1, 2, 3].map((attempt) => backOffMs(attempt, 0))).toEqual([250, 500, 1000, 2000]);
    expect(backOffMs(0, 0.999)).toBe(500);
    expect(backOffMs(40, 0.999)).toBeLessThanOrEqual(30_000);
  });

  it("keep to Retry-After in seconds and as a date", () => {
    const now = Date.UTC(2026, 2, 1, 9, 0, 0);
    expect(retryAfterMs("7", now)).toBe(7000);
    expect(retryAfterMs("Sun, 01 Mar 2026 09:00:30 GMT", now)).toBe(30_000);
    expect(retryAfterMs("Sun, 01 Mar 2026 08:00:00 GMT", now)).toBe(0);
    expect(retryAfterMs("soon", now)).toBe(null);
    expect(retryAfterMs(null, now)).toBe(null);
  });
});
