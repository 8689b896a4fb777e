/** Builds the pages, the server and the reporter to dist/. With --if-needed only where a source is newer. */
import { spawnSync } from "node:child_process";
import { mkdirSync, utimesSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { isBuilt, stampFile } from "./machine/freshness.mjs";

const root = dirname(dirname(fileURLToPath(import.meta.url)));
const vite = join(root, "node_modules", "vite", "bin", "vite.js");

function build(what, args) {
  const started = Date.now();
  const { status, stdout, stderr } = spawnSync(process.execPath, [vite, "build", "--logLevel", "warn", ...args], {
    cwd: root,
    encoding: "utf8",
  });
  if (status !== 0) {
    process.stderr.write(`${stdout}${stderr}\nBuilding the ${what} failed.\n`);
    process.exit(1);
  }
  console.log(`built the ${what} in ${((Date.now() - started) / 1000).toFixed(1)} s`);
}

if (!process.argv.includes("--if-needed") || !isBuilt(root)) {
  // The stamp bears the time of the beginning: a source that is saved meanwhile is newer than it.
  const begun = new Date();
  build("pages", []);
  build("server", ["--mode", "server"]);
  build("reporter", ["--mode", "reporter"]);
  mkdirSync(join(root, "dist"), { recursive: true });
  writeFileSync(stampFile(root), "");
  utimesSync(stampFile(root), begun, begun);
}
