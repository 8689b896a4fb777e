import { spawnSync } from "node:child_process";

/** A history of 10,000 commits with their paths fits. */
const MOST_BYTES = 256 * 1024 * 1024;

/** What a git command prints, or null where git is missing or fails. */
export function git(folder: string, args: readonly string[]): string | null {
  const { status, stdout } = spawnSync("git", args, {
    cwd: folder,
    encoding: "utf8",
    maxBuffer: MOST_BYTES,
    stdio: ["ignore", "pipe", "ignore"],
  });
  return status === 0 ? stdout : null;
}

/** The same as one trimmed line; null also for an empty one. */
export const gitLine = (folder: string, args: readonly string[]): string | null => git(folder, args)?.trim() || null;
