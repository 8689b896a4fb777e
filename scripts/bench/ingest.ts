import { spawn } from "node:child_process";
import type { ChildProcess } from "node:child_process";
import { readFile } from "node:fs/promises";
import { once } from "node:events";
import { line, makeBuild, median } from "./scenario.ts";

const TIMES_OF_PARSE = 3;
const TIMES_OF_BODY = 8;
const PAGE_MS = 100;
const RUNS = 5;

interface Served {
  readonly url: string;
  readonly token: string;
}

async function serve(): Promise<{ served: Served; child: ChildProcess }> {
  const child = spawn(process.execPath, ["--import", "tsx", new URL("./ingestServer.ts", import.meta.url).pathname], {
    stdio: ["pipe", "pipe", "inherit"],
  });
  if (!child.stdout) throw new Error("the server's output cannot be read");
  const [first] = (await once(child.stdout, "data")) as [Buffer];
  return { served: JSON.parse(first.toString()) as Served, child };
}

async function peakBytes(pid: number): Promise<number> {
  const status = await readFile(`/proc/${pid}/status`, "utf8");
  return Number(/VmHWM:\s+(\d+) kB/.exec(status)?.[1]) * 1024;
}

/** Asks for a page's data over and over until told to stop; answers with how long each answer took. */
function watchPage({ url, token }: Served): { stop(): Promise<number[]> } {
  const times: number[] = [];
  let going = true;
  const watching = (async () => {
    while (going) {
      const start = performance.now();
      const answer = await fetch(`${url}/api/v1/projects/bench`, {
        headers: { Authorization: `Bearer ${token}` },
      });
      await answer.arrayBuffer();
      if (!answer.ok) throw new Error(`the page's data was answered with ${answer.status}`);
      times.push(performance.now() - start);
      await new Promise((resolve) => setTimeout(resolve, 5));
    }
  })();
  return {
    stop: async () => {
      going = false;
      await watching;
      return times;
    },
  };
}

async function post({ url, token }: Served, bytes: Uint8Array<ArrayBuffer>): Promise<number> {
  const start = performance.now();
  const answer = await fetch(`${url}/api/v1/projects/bench/builds`, {
    method: "POST",
    headers: { Authorization: `Bearer ${token}`, "Content-Type": "application/json" },
    body: bytes,
  });
  const text = await answer.text();
  const time = performance.now() - start;
  if (answer.status !== 201) throw new Error(`the build was answered with ${answer.status}: ${text}`);
  return time;
}

/**
 * A build of 1,000,000 entries from first byte to answer, as a multiple of parsing the same bytes as JSON; the
 * server's peak memory as a multiple of the body; how long another page's data took meanwhile. Each posting is of new
 * numbers in a lane of its own, so that all of it is judged and stored.
 */
export async function run(): Promise<void> {
  const { served, child } = await serve();
  const parses: number[] = [];
  const posts: number[] = [];
  const pages: number[] = [];
  let bodyBytes = 0;
  let peak = 0;
  for (let k = 0; k < RUNS; k += 1) {
    const document = makeBuild(1, { blocks: 1, rows: 1000, columns: 1000 }, 1 + k, `lane ${k}`);
    const bytes = new TextEncoder().encode(JSON.stringify(document));
    bodyBytes = bytes.length;
    const start = performance.now();
    JSON.parse(new TextDecoder().decode(bytes));
    parses.push(performance.now() - start);
    const page = watchPage(served);
    posts.push(await post(served, bytes));
    pages.push(...(await page.stop()));
    if (k === 0) peak = await peakBytes(child.pid as number);
  }
  const peakOfAll = await peakBytes(child.pid as number);
  child.kill("SIGTERM");
  await once(child, "exit");
  console.log(`a build of 1,000,000 entries, ${(bodyBytes / 1e6).toFixed(1)} MB of JSON, medians of ${RUNS}`);
  console.log(
    `  decoding and JSON.parse ${median(parses).toFixed(0)} ms, first byte to answer ${median(posts).toFixed(0)} ms`,
  );
  line(
    "first byte to answer, in times of decoding and JSON.parse",
    median(posts) / median(parses),
    "times",
    TIMES_OF_PARSE,
  );
  line("the server's peak memory after the first, in times of the body", peak / bodyBytes, "times", TIMES_OF_BODY);
  line(`the same after ${RUNS}`, peakOfAll / bodyBytes, "times", TIMES_OF_BODY);
  line(`slowest of ${pages.length} answers to another page meanwhile`, Math.max(...pages), "ms", PAGE_MS);
}
