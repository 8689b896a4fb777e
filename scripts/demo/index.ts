/**
 * `npm run demo`: serves the demo project on its own data folder, posting its history first where that is not done.
 *   --once       post, print what was found, and end (1 where a mistake was not named)
 *   --fresh      post anew
 *   --data DIR   another data folder than .data/demo
 *   --port N     another port than 4380
 */
import { spawnSync } from "node:child_process";
import { dirname, join, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import { parseArgs } from "node:util";
import { loadConfig } from "../../server/config.ts";
import { startServer } from "../../server/start.ts";
import { signIn } from "./client.ts";
import { climbOf, findings } from "./findings.ts";
import { prepareFolder } from "./folder.ts";
import { demoHistory } from "./history/history.ts";
import { ADMINISTRATOR, DEMO_PASSWORD } from "./people.ts";
import { accountLines, findingLines, scenarioLine } from "./print.ts";
import { progressOn } from "./progress.ts";
import { openProject, PROJECT } from "./project.ts";
import { seed } from "./seed.ts";

const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
const { values: given } = parseArgs({
  options: {
    once: { type: "boolean", default: false },
    fresh: { type: "boolean", default: false },
    data: { type: "string", default: join(root, ".data", "demo") },
    port: { type: "string", default: "4380" },
  },
});

const say = (...lines: string[]) => process.stdout.write(`${lines.join("\n")}\n`);
const now = Date.now();
const folder = resolve(given.data);
const prepared = prepareFolder(folder, demoHistory(now), now, given.fresh);
const history = demoHistory(prepared.seededAt ?? now);

if (!given.once) {
  const built = spawnSync(process.execPath, [join(root, "scripts", "build.mjs"), "--if-needed"], { stdio: "inherit" });
  if (built.status !== 0) process.exit(1);
}

const server = await startServer(
  loadConfig({
    PORT: given.port,
    CLINOGRAPH_DATA: folder,
    CLINOGRAPH_ADMIN_EMAIL: ADMINISTRATOR.email,
    CLINOGRAPH_ADMIN_PASSWORD: DEMO_PASSWORD,
    CLINOGRAPH_REQUESTS_PER_MINUTE: "0",
    LOG_LEVEL: "warn",
  }),
).catch((error: NodeJS.ErrnoException) => {
  if (error.code !== "EADDRINUSE") throw error;
  process.stderr.write(`Port ${given.port} is taken: give another with npm run demo -- --port N.\n`);
  process.exit(1);
});

let stopping = false;
const stop = (code: number) => {
  if (stopping) return;
  stopping = true;
  void server.close().then(() => process.exit(code));
};
for (const signal of ["SIGINT", "SIGTERM"] as const) process.on(signal, () => stop(0));

try {
  const reader = await signIn(server.url, ADMINISTRATOR.email, DEMO_PASSWORD);
  if (prepared.seededAt === null) {
    say(scenarioLine(history));
    const began = Date.now();
    const token = await openProject(server.url, reader);
    const target = { server: server.url, project: PROJECT, token };
    await seed({ target, reader, history, progress: progressOn(process.stdout) });
    prepared.complete();
    say(`Posted in ${((Date.now() - began) / 1000).toFixed(0)} s.`);
  }
  // Seeded before: the address is wanted first.
  const accounts = [...accountLines(server.url), "Ctrl-C stops it; run it again and it starts at once."];
  if (!given.once && prepared.seededAt !== null) say("", ...accounts);
  const found = await findings(reader, history);
  say("", ...findingLines(found, await climbOf(reader, found, history)), "");
  if (given.once) stop(found.every(({ right }) => right) ? 0 : 1);
  else if (prepared.seededAt === null) say(...accounts);
} catch (error) {
  // While it is being stopped, a posting that is cut off is no news.
  if (!stopping) {
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
    stop(1);
  }
}
