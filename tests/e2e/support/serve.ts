import { spawn } from "node:child_process";
import type { ChildProcess } from "node:child_process";
import { once } from "node:events";
import { existsSync } from "node:fs";
import { mkdtemp, rm } from "node:fs/promises";
import { createServer } from "node:net";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { TestProject } from "vitest/node";

declare module "vitest" {
  interface ProvidedContext {
    /** Address of the built server over the demo's record. */
    url: string;
  }
}

const root = new URL("../../../", import.meta.url).pathname;

/** Posts the demo's history into a folder of its own, then serves it by the server as built. */
export default async function serve(project: TestProject): Promise<() => Promise<void>> {
  const built = join(root, "dist", "server", "index.js");
  if (!existsSync(built)) throw new Error("dist/ is missing: run npm run build before the end-to-end tests");
  const folder = await mkdtemp(join(tmpdir(), "clinograph-e2e-"));
  const port = await freePort();
  await seeded(folder, port);
  const url = `http://127.0.0.1:${port}`;
  const server = spawn(process.execPath, [built], {
    cwd: folder,
    stdio: ["ignore", "ignore", "inherit"],
    env: {
      ...process.env,
      NODE_ENV: "production",
      PORT: String(port),
      CLINOGRAPH_DATA: folder,
      CLINOGRAPH_REQUESTS_PER_MINUTE: "0",
      LOG_LEVEL: "error",
    },
  });
  await ready(url, server);
  project.provide("url", url);
  return async () => {
    server.kill("SIGTERM");
    if (server.exitCode === null) await once(server, "exit");
    await rm(folder, { recursive: true, force: true });
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

async function seeded(folder: string, port: number): Promise<void> {
  const demo = join(root, "scripts", "demo", "index.ts");
  const args = ["--import", "tsx", demo, "--once", "--data", folder, "--port", String(port)];
  const child = spawn(process.execPath, args, { cwd: root, stdio: ["ignore", "ignore", "inherit"] });
  const [code] = (await once(child, "exit")) as [number | null];
  if (code !== 0) throw new Error(`the demo ended with ${code}`);
}

async function ready(url: string, server: ChildProcess): Promise<void> {
  while (server.exitCode === null) {
    const answer = await fetch(`${url}/readyz`).catch(() => null);
    if (answer?.ok) return;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  throw new Error(`the server ended with ${server.exitCode}`);
}
