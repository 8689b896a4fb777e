import { spawn, spawnSync } from "node:child_process";
import { once } from "node:events";
import { mkdtemp, readFile, rm } from "node:fs/promises";
import { createServer } from "node:net";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";

const root = new URL("../../", import.meta.url).pathname;
const ADMINISTRATOR = { email: "bench@example.org", password: "only for this measurement" };

export interface Served {
  readonly url: string;
  /** May post and read in the project `bench`. */
  readonly token: string;
  /** Most memory that the server's process held so far, in bytes (Linux). */
  peakBytes(): Promise<number>;
  stop(): Promise<void>;
}

/** The server as built, in a process and folder of its own, with an empty project `bench`. */
export async function serve(): Promise<Served> {
  const built = spawnSync(process.execPath, [join(root, "scripts", "build.mjs"), "--if-needed"], { stdio: "inherit" });
  if (built.status !== 0) throw new Error("the server could not be built");
  const folder = await mkdtemp(join(tmpdir(), "clinograph-bench-"));
  const port = await freePort();
  const url = `http://127.0.0.1:${port}`;
  const child = spawn(process.execPath, [join(root, "dist", "server", "index.js")], {
    cwd: folder,
    stdio: ["ignore", "ignore", "inherit"],
    env: {
      ...process.env,
      NODE_ENV: "production",
      PORT: String(port),
      CLINOGRAPH_DATA: folder,
      CLINOGRAPH_ADMIN_EMAIL: ADMINISTRATOR.email,
      CLINOGRAPH_ADMIN_PASSWORD: ADMINISTRATOR.password,
      CLINOGRAPH_REQUESTS_PER_MINUTE: "0",
      LOG_LEVEL: "error",
    },
  });
  while (!(await fetch(`${url}/readyz`).catch(() => null))?.ok) {
    if (child.exitCode !== null) throw new Error(`the server ended with ${child.exitCode}`);
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
  return {
    url,
    token: await makeToken(url),
    peakBytes: async () => {
      const status = await readFile(`/proc/${child.pid}/status`, "utf8");
      return Number(/VmHWM:\s+(\d+) kB/.exec(status)?.[1]) * 1024;
    },
    stop: async () => {
      child.kill("SIGTERM");
      await once(child, "exit");
      await rm(folder, { recursive: true, force: true });
    },
  };
}

async function freePort(): Promise<number> {
  const server = createServer().listen(0, "127.0.0.1");
  await once(server, "listening");
  const { port } = server.address() as AddressInfo;
  server.close();
  await once(server, "close");
  return port;
}

async function makeToken(url: string): Promise<string> {
  const signedIn = await send(url, "/session", ADMINISTRATOR, {});
  const cookie = (signedIn.headers.get("set-cookie") ?? "").split(";")[0] as string;
  const { csrfToken } = (await signedIn.json()) as { csrfToken: string };
  const headers = { Cookie: cookie, "X-CSRF-Token": csrfToken };
  await send(url, "/projects", { slug: "bench", name: "Bench" }, headers);
  const made = await send(url, "/projects/bench/tokens", { name: "bench", scopes: ["post", "read"] }, headers);
  return ((await made.json()) as { token: string }).token;
}

async function send(url: string, path: string, body: object, headers: Record<string, string>): Promise<Response> {
  const answer = await fetch(`${url}/api/v1${path}`, {
    method: "POST",
    headers: { "Content-Type": "application/json", ...headers },
    body: JSON.stringify(body),
  });
  if (!answer.ok) throw new Error(`${path} was answered with ${answer.status}: ${await answer.text()}`);
  return answer;
}
