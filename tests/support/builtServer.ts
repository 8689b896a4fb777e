import { spawn } from "node:child_process";
import type { ChildProcess } from "node:child_process";
import { once } from "node:events";
import { existsSync } from "node:fs";
import { createServer } from "node:net";
import type { AddressInfo } from "node:net";
import { join } from "node:path";

const root = new URL("../../", import.meta.url).pathname;

export interface BuiltServer {
  readonly url: string;
  readonly process: ChildProcess;
  /** What it printed so far. */
  output(): string;
  stop(): Promise<void>;
}

/** Starts the server as built, in a process of its own, over a data folder; resolves when it is ready. */
export async function startBuiltServer(
  folder: string,
  options: { readonly port?: number; readonly environment?: Readonly<Record<string, string>> } = {},
): Promise<BuiltServer> {
  const built = join(root, "dist", "server", "index.js");
  if (!existsSync(built)) throw new Error("dist/ is missing: run npm run build first");
  const port = options.port ?? (await freePort());
  const url = `http://127.0.0.1:${port}`;
  const child = spawn(process.execPath, [built], {
    cwd: folder,
    stdio: ["ignore", "pipe", "inherit"],
    env: {
      ...process.env,
      NODE_ENV: "production",
      PORT: String(port),
      CLINOGRAPH_DATA: folder,
      CLINOGRAPH_REQUESTS_PER_MINUTE: "0",
      LOG_LEVEL: "error",
      ...options.environment,
    },
  });
  let output = "";
  child.stdout.on("data", (chunk: Buffer) => {
    output += chunk.toString();
  });
  while (!(await fetch(`${url}/readyz`).catch(() => null))?.ok) {
    if (child.exitCode !== null) throw new Error(`the server ended with ${child.exitCode}`);
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
  return {
    url,
    process: child,
    output: () => output,
    stop: async () => {
      child.kill("SIGTERM");
      if (child.exitCode === null) await once(child, "exit");
    },
  };
}

/** A port that nobody listened at a moment ago. */
export async function freePort(): Promise<number> {
  const server = createServer().listen(0, "127.0.0.1");
  await once(server, "listening");
  const { port } = server.address() as AddressInfo;
  server.close();
  await once(server, "close");
  return port;
}
