import { spawnSync } from "node:child_process";
import { mkdtemp, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { startBuiltServer } from "../../tests/support/builtServer.ts";

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
  const server = await startBuiltServer(folder, {
    environment: {
      CLINOGRAPH_ADMIN_EMAIL: ADMINISTRATOR.email,
      CLINOGRAPH_ADMIN_PASSWORD: ADMINISTRATOR.password,
    },
  });
  return {
    url: server.url,
    token: await makeToken(server.url),
    peakBytes: async () => {
      const status = await readFile(`/proc/${server.process.pid}/status`, "utf8");
      return Number(/VmHWM:\s+(\d+) kB/.exec(status)?.[1]) * 1024;
    },
    stop: async () => {
      await server.stop();
      await rm(folder, { recursive: true, force: true });
    },
  };
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
