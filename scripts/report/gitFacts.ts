import { readFileSync } from "node:fs";
import { resolve } from "node:path";
import type { CommitDocument } from "../../shared/schemas/commit.ts";
import { git, gitLine } from "./git.ts";

export interface GitFacts {
  readonly commit: CommitDocument;
  /** Earlier commits, newest first, merges and side branches included. */
  readonly history: readonly CommitDocument[];
  /** Branch that is checked out, for its tip; null for another commit and with a detached head, as in most CI systems. */
  readonly branch: string | null;
  /** True where the clone ends before the history does. */
  readonly shallow: boolean;
}

/** Limits of the wire; what is longer is shortened, or left out where half of it would mislead. */
const MOST_SUBJECT = 500;
const MOST_NAME = 200;
const MOST_PATHS = 10_000;
const MOST_PATH_LENGTH = 1000;

/** Bytes that no subject or name holds: a commit begins with RS, its fields end with US, its paths follow GS. */
const FORMAT = "%x1e%H%x1f%P%x1f%cI%x1f%aN%x1f%aE%x1f%s%x1d";

/**
 * A commit and up to `history` of its ancestors as git knows them; null outside a repository or for an unknown commit.
 * A merge is told with what it changed against its first parent.
 */
export function gitFacts(folder: string, revision: string, history: number): GitFacts | null {
  // Anything else could be taken for an option of git; the server will say what is wrong with it.
  if (!/^(HEAD|[0-9a-f]{40,64})$/.test(revision)) return null;
  const sha = gitLine(folder, ["rev-parse", "--verify", "--quiet", `${revision}^{commit}`]);
  if (sha === null) return null;
  const log = (...more: string[]) =>
    git(folder, ["log", "-z", "--topo-order", "--name-only", `--format=${FORMAT}`, `-${history + 1}`, ...more, sha]);
  // Git before 2.31 cannot look at a merge along its first parent only; it then tells no paths for merges.
  const text = log("--diff-merges=first-parent") ?? log();
  if (text === null) return null;
  const cut = shallowBoundary(folder);
  const [commit, ...earlier] = text
    .split("\x1e")
    .slice(1)
    .map((record) => readCommit(folder, record, cut));
  if (!commit) return null;
  const isTip = gitLine(folder, ["rev-parse", "--verify", "--quiet", "HEAD"]) === sha;
  const branch = isTip ? gitLine(folder, ["symbolic-ref", "--short", "--quiet", "HEAD"]) : null;
  return { commit, history: earlier, branch, shallow: cut.size > 0 };
}

function readCommit(folder: string, record: string, cut: ReadonlySet<string>): CommitDocument {
  const [head = "", tail = ""] = record.split("\x1d");
  const [sha = "", parents = "", committedAt = "", name = "", email = "", subject = ""] = head.split("\x1f");
  const paths = tail
    .split("\0")
    .map((path) => path.replace(/^\n/, ""))
    .filter(Boolean);
  // At the edge of a shallow clone git pretends that there are no parents and that every file is new.
  const edge = cut.has(sha);
  const whole = paths.length <= MOST_PATHS && paths.every((path) => path.length <= MOST_PATH_LENGTH);
  return {
    sha,
    parents: edge ? storedParents(folder, sha) : parents.split(" ").filter(Boolean),
    subject: subject.slice(0, MOST_SUBJECT),
    author: { name: name.slice(0, MOST_NAME), ...(email.length <= 320 ? { email } : {}) },
    committedAt,
    ...(edge || !whole ? {} : { changedPaths: paths }),
  };
}

/** The parents as the commit itself names them. */
function storedParents(folder: string, sha: string): string[] {
  const text = git(folder, ["cat-file", "commit", sha]) ?? "";
  const head = text.slice(0, text.indexOf("\n\n"));
  return [...head.matchAll(/^parent ([0-9a-f]+)$/gm)].map((match) => match[1]!);
}

function shallowBoundary(folder: string): ReadonlySet<string> {
  const file = gitLine(folder, ["rev-parse", "--git-path", "shallow"]);
  if (file === null) return new Set();
  try {
    return new Set(readFileSync(resolve(folder, file), "utf8").split("\n").filter(Boolean));
  } catch {
    return new Set();
  }
}
