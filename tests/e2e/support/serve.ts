import { spawn } from "node:child_process";
import { once } from "node:events";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { TestProject } from "vitest/node";
import { freePort, startBuiltServer } from "../../support/builtServer.ts";

declare module "vitest" {
  interface ProvidedContext {
    /** Address of the built server over the demo's record. */
    url: string;
  }
}

const root = new URL("../../../", import.meta.url).pathname;

/** Posts the demo's history into a folder of its own, then serves it by the server as built. */
export default async function serve(project: TestProject): Promise<() => Promise<void>> {
  const folder = await mkdtemp(join(tmpdir(), "clinograph-e2e-"));
  const port = await freePort();
  await seed(folder, port);
  const server = await startBuiltServer(folder, { port });
  project.provide("url", server.url);
  return async () => {
    await server.stop();
    await rm(folder, { recursive: true, force: true });
  };
}

async function seed(folder: string, port: number): Promise<void> {
  const demo = join(root, "scripts", "demo", "index.ts");
  const args = ["--import", "tsx", demo, "--once", "--data", folder, "--port", String(port)];
  const child = spawn(process.execPath, args, { cwd: root, stdio: ["ignore", "ignore", "inherit"] });
  const [code] = (await once(child, "exit")) as [number | null];
  if (code !== 0) throw new Error(`the demo ended with ${code}`);
}
