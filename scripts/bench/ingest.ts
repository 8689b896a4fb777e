import { once } from "node:events";
import { request as httpRequest } from "node:http";
import type { IncomingMessage } from "node:http";
import { Worker } from "node:worker_threads";
import { serve } from "./ingestServer.ts";
import type { Served } from "./ingestServer.ts";
import { line, makeBuild, median } from "./scenario.ts";

const TIMES_OF_PARSE = 3;
const TIMES_OF_BODY = 8;
const PAGE_MS = 100;
const RUNS = 5;

/** Time from the first byte sent to the whole answer; by node:http, which sends the bytes as they are. */
async function post({ url, token }: Served, bytes: Uint8Array): Promise<number> {
  const request = httpRequest(`${url}/api/v1/projects/bench/builds`, {
    method: "POST",
    headers: {
      Authorization: `Bearer ${token}`,
      "Content-Type": "application/json",
      "Content-Length": String(bytes.length),
    },
  });
  const start = performance.now();
  request.end(bytes);
  const [answer] = (await once(request, "response")) as [IncomingMessage];
  const text = (await answer.toArray()).join("");
  const time = performance.now() - start;
  if (answer.statusCode !== 201) throw new Error(`the build was answered with ${answer.statusCode}: ${text}`);
  return time;
}

function bodyOf(run: number): Uint8Array {
  const document = makeBuild(1, { blocks: 1, rows: 1000, columns: 1000 }, 1 + run, `lane ${run}`);
  return new Uint8Array(new TextEncoder().encode(JSON.stringify(document)));
}

function parseTime(bytes: Uint8Array): number {
  const start = performance.now();
  JSON.parse(new TextDecoder().decode(bytes));
  return performance.now() - start;
}

/** Median time from first byte to answer as a multiple of parsing, and the server's peak memory meanwhile. */
async function measurePostings(served: Served): Promise<void> {
  const parses: number[] = [];
  const posts: number[] = [];
  let bodyBytes = 0;
  let firstPeak = 0;
  for (let run = 0; run < RUNS; run += 1) {
    const bytes = bodyOf(run);
    bodyBytes = bytes.length;
    parses.push(parseTime(bytes));
    posts.push(await post(served, bytes));
    if (run === 0) firstPeak = await served.peakBytes();
  }
  console.log(`a build of 1,000,000 entries, ${(bodyBytes / 1e6).toFixed(1)} MB of JSON, medians of ${RUNS}`);
  console.log(
    `  decoding and JSON.parse of the bytes ${median(parses).toFixed(0)} ms, first byte to answer ${median(posts).toFixed(0)} ms`,
  );
  line("first byte to answer", median(posts) / median(parses), "times decoding and parsing", TIMES_OF_PARSE);
  line("the server's peak memory after the first", firstPeak / bodyBytes, "times the body", TIMES_OF_BODY);
  line(`the same after ${RUNS}`, (await served.peakBytes()) / bodyBytes, "times the body", TIMES_OF_BODY);
}

/** How long another page's data takes while builds are posted, asked for from a thread of its own. */
async function measurePages(served: Served): Promise<void> {
  const watcher = new Worker(new URL("./pageWatcher.mjs", import.meta.url), {
    workerData: { url: `${served.url}/api/v1/projects/bench/builds`, token: served.token },
  });
  const pages: number[] = [];
  for (let run = RUNS; run < 2 * RUNS; run += 1) {
    const bytes = bodyOf(run);
    watcher.postMessage("begin");
    await once(watcher, "message");
    await post(served, bytes);
    watcher.postMessage("end");
    const [times] = (await once(watcher, "message")) as [number[]];
    pages.push(...times);
  }
  await watcher.terminate();
  console.log(`  another page's data meanwhile: ${pages.length} answers, median ${median(pages).toFixed(1)} ms`);
  line("the slowest", Math.max(...pages), "ms", PAGE_MS);
}

/** Each posting is of new numbers in a lane of its own, so that all of it is judged and stored. */
export async function run(): Promise<void> {
  const served = await serve();
  try {
    await measurePostings(served);
    await measurePages(served);
  } finally {
    await served.stop();
  }
}
