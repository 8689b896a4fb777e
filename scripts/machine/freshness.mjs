import { existsSync, readdirSync, statSync } from "node:fs";
import { join } from "node:path";

/** What the three builds are made of, besides the packages (the lock file stands for them). */
const SOURCES = [
  "src",
  "server",
  "shared",
  "scripts/report",
  "scripts/report.ts",
  "index.html",
  "vite.config.ts",
  "package-lock.json",
];
const STAMP = "dist/.built";

function newest(path) {
  const stat = statSync(path, { throwIfNoEntry: false });
  if (!stat) return 0;
  if (!stat.isDirectory()) return stat.mtimeMs;
  // The folder's own time tells of files that were taken away.
  return readdirSync(path).reduce((latest, name) => Math.max(latest, newest(join(path, name))), stat.mtimeMs);
}

export const stampFile = (root) => join(root, STAMP);

/** True where `dist/` was made after the last change of any source. */
export function isBuilt(root) {
  const stamp = stampFile(root);
  if (!existsSync(stamp)) return false;
  const built = statSync(stamp).mtimeMs;
  return SOURCES.every((source) => newest(join(root, source)) <= built);
}
