import { createServer, get } from "node:http";
import type { IncomingMessage, ServerResponse } from "node:http";
import type { AddressInfo } from "node:net";
import { Writable } from "node:stream";
import { setImmediate } from "node:timers/promises";
import { describe, expect, it } from "vitest";
import { csvChunks, jsonChunks } from "../../../server/features/exports/chunks.ts";
import type { ExportPages } from "../../../server/features/exports/chunks.ts";
import { streamed } from "../../../server/http/reply.ts";
import { sendStream } from "../../../server/http/sendStream.ts";
import type { ExportedWaiver, ExportDocument } from "../../../shared/schemas/export.ts";
import { parseTable } from "./parseCsv.ts";

const PAGE = 100;
const waiver = (id: number): ExportedWaiver => ({
  id: String(id),
  state: "approved",
  selector: { model: "rotor.*" },
  reason: `=a reason, "quoted"\nover two lines ${id}`,
  maxError: id / 3,
  expiresAt: "2026-01-01T00:00:00.000Z",
  askedBy: null,
  askedAt: "2026-01-01T00:00:00.000Z",
  decidedBy: null,
  decidedAt: null,
});

async function* nothing() {}
function pagesOf(count: number, made: { pages: number }): ExportPages {
  async function* waivers() {
    for (let page = 0; page < count; page++) {
      await setImmediate();
      made.pages += 1;
      yield Array.from({ length: PAGE }, (_, at) => waiver(page * PAGE + at));
    }
  }
  return { builds: nothing, breaks: nothing, baselines: nothing, waivers };
}

const HEAD = { project: "hull", lane: null, from: null, to: null };

/** Takes one chunk at a time, when it likes to; `onChunk` sees the chunks that came. */
class SlowSink extends Writable {
  text = "";
  private readonly onChunk: () => void;
  constructor(onChunk: () => void) {
    super({ highWaterMark: 1, decodeStrings: false });
    this.onChunk = onChunk;
  }
  setHeader(): void {}
  override _write(chunk: string, _encoding: BufferEncoding, done: (error?: Error) => void): void {
    this.text += chunk;
    this.onChunk();
    void setImmediate().then(() => done());
  }
}

async function sent(chunks: AsyncIterable<string>, onChunk: () => void): Promise<string> {
  const sink = new SlowSink(onChunk);
  await sendStream(sink as unknown as ServerResponse, streamed("text/plain", chunks));
  return sink.text;
}

describe("a record of 10,000 rows", () => {
  it("is never more than two pages ahead of its reader, as CSV", async () => {
    const made = { pages: 0 };
    const ahead: number[] = [];
    const text = await sent(csvChunks(pagesOf(100, made), "waivers"), () => {
      // The first chunk is the header.
      ahead.push(made.pages - Math.max(0, ahead.length - 1));
    });
    expect(Math.max(...ahead)).toBeLessThanOrEqual(2);
    const rows = parseTable(text);
    expect(rows).toHaveLength(10_000);
    expect(rows.map((row) => Number(row.maxError))).toEqual(Array.from({ length: 10_000 }, (_, id) => id / 3));
    expect(rows[7].reason).toBe(`'${waiver(7).reason}`);
  });

  it("is never more than two pages ahead of its reader, as one valid JSON document", async () => {
    const made = { pages: 0 };
    const ahead: number[] = [];
    let chunks = 0;
    const text = await sent(jsonChunks(HEAD, pagesOf(100, made)), () => {
      chunks += 1;
      // Head, two empty sections of two chunks each, and the opening of the third go before the first page.
      ahead.push(made.pages - Math.max(0, chunks - 6));
    });
    expect(Math.max(...ahead)).toBeLessThanOrEqual(2);
    const document = JSON.parse(text) as ExportDocument;
    expect(Object.keys(document)).toEqual([
      ...["format", "project", "lane", "from", "to", "caution"],
      ...["builds", "breaks", "waivers", "baselines"],
    ]);
    expect(document.waivers).toEqual(Array.from({ length: 10_000 }, (_, id) => waiver(id)));
  });

  it("carries the caution once in a table, in its first row", async () => {
    const rows = parseTable(await sent(csvChunks(pagesOf(2, { pages: 0 }), "waivers"), () => {}));
    expect(rows[0].caution).toMatch(/^Agreement at the sampled points/);
    expect(rows.slice(1).every((row) => row.caution === "")).toBe(true);
  });
});

describe("sendStream", () => {
  async function serve(chunks: AsyncIterable<string>) {
    const outcome: { failure?: unknown } = {};
    let settle = () => {};
    const settled = new Promise<void>((resolve) => (settle = resolve));
    const server = createServer((_request, response) => {
      sendStream(response, streamed("text/plain", chunks)).then(settle, (error: unknown) => {
        outcome.failure = error;
        if (!response.headersSent) response.writeHead(500).end();
        settle();
      });
    });
    await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
    const { port } = server.address() as AddressInfo;
    const response = await new Promise<IncomingMessage>((resolve, reject) => {
      get({ port, host: "127.0.0.1", agent: false }, resolve).on("error", reject);
    });
    const close = () => new Promise<void>((resolve) => server.close(() => resolve()));
    return { response, settled, outcome, close };
  }

  it("stops making chunks when the other side goes, and closes what makes them", async () => {
    let made = 0;
    let closed = false;
    async function* endless() {
      try {
        for (;;) {
          made += 1;
          await setImmediate();
          yield "x".repeat(65_536);
        }
      } finally {
        closed = true;
      }
    }
    const { response, settled, outcome, close } = await serve(endless());
    response.destroy();
    await settled;
    await close();
    expect(closed).toBe(true);
    expect(outcome.failure).toBeUndefined();
    // What the sockets of this machine hold, not what could have been made.
    expect(made).toBeLessThan(1000);
  });

  it("throws a failure before the first chunk, so that it can be answered", async () => {
    async function* failing(): AsyncGenerator<string> {
      await setImmediate();
      throw new RangeError("nothing to read");
    }
    const { response, outcome, close } = await serve(failing());
    expect(response.statusCode).toBe(500);
    response.resume();
    await close();
    expect(outcome.failure).toBeInstanceOf(RangeError);
  });

  it("cuts the connection where it fails later, so that a part is not taken for all", async () => {
    async function* failing() {
      yield "a part";
      await setImmediate();
      throw new RangeError("no more");
    }
    const { response, settled, outcome, close } = await serve(failing());
    const ended = new Promise<string>((resolve) => {
      response.on("end", () => resolve("whole"));
      response.on("error", () => resolve("cut"));
    });
    response.resume();
    await settled;
    expect(await ended).toBe("cut");
    await close();
    expect(outcome.failure).toBeInstanceOf(RangeError);
  });
});
