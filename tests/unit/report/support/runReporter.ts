import { spawn } from "node:child_process";
import { fileURLToPath } from "node:url";

const SCRIPT = fileURLToPath(new URL("../../../../scripts/report.ts", import.meta.url));
const TSX = import.meta.resolve("tsx");

export interface Ended {
  readonly code: number | null;
  readonly output: string;
  readonly errors: string;
}

export interface Call {
  readonly folder: string;
  readonly environment?: Readonly<Record<string, string>>;
  readonly input?: string;
  /** Another file than the sources' entry: the built one. */
  readonly script?: string;
}

/** Really runs the reporter as a process that knows nothing of this one's environment. */
export function runReporter(argv: readonly string[], { folder, environment, input, script }: Call): Promise<Ended> {
  const how = script === undefined ? ["--import", TSX, SCRIPT] : [script];
  const child = spawn(process.execPath, [...how, ...argv], {
    cwd: folder,
    env: { PATH: process.env.PATH ?? "", HOME: folder, ...environment },
  });
  child.stdin.end(input ?? "");
  const texts = { output: "", errors: "" };
  child.stdout.on("data", (chunk: Buffer) => (texts.output += chunk.toString()));
  child.stderr.on("data", (chunk: Buffer) => (texts.errors += chunk.toString()));
  return new Promise((resolve, reject) => {
    child.once("error", reject);
    child.once("close", (code) => resolve({ code, ...texts }));
  });
}
