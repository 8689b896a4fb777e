import { execFileSync } from "node:child_process";
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";

/** A real git repository in a folder of its own. */
export interface Repository {
  readonly folder: string;
  git(...args: string[]): string;
  write(path: string, text: string): void;
  /** Writes a file and commits it; the hash. */
  commit(subject: string, path: string, text?: string): string;
  dispose(): void;
}

export function makeFolder(): string {
  return mkdtempSync(join(tmpdir(), "clinograph-report-"));
}

export function makeRepository(): Repository {
  const folder = makeFolder();
  let minute = 0;
  const git = (...args: string[]): string => {
    const date = new Date(Date.UTC(2026, 2, 1, 9, minute)).toISOString();
    return execFileSync("git", args, {
      cwd: folder,
      encoding: "utf8",
      stdio: ["ignore", "pipe", "pipe"],
      env: {
        PATH: process.env.PATH ?? "",
        HOME: folder,
        GIT_CONFIG_NOSYSTEM: "1",
        GIT_AUTHOR_NAME: "Ada Minster",
        GIT_AUTHOR_EMAIL: "ada@example.org",
        GIT_COMMITTER_NAME: "Bot",
        GIT_COMMITTER_EMAIL: "bot@example.org",
        GIT_AUTHOR_DATE: date,
        GIT_COMMITTER_DATE: date,
      },
    }).trim();
  };
  const write = (path: string, text: string) => {
    mkdirSync(dirname(join(folder, path)), { recursive: true });
    writeFileSync(join(folder, path), text);
  };
  git("init", "-q", "-b", "main");
  return {
    folder,
    git,
    write,
    commit: (subject, path, text = subject) => {
      minute += 1;
      write(path, text);
      git("add", "--", path);
      git("commit", "-q", "-m", subject);
      return git("rev-parse", "HEAD");
    },
    dispose: () => rmSync(folder, { recursive: true, force: true }),
  };
}
