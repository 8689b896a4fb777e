import { createHash } from "node:crypto";
import type { CommitDocument } from "../../../shared/schemas/commit.ts";
import type { LaneName } from "../blocks.ts";
import { FIRST_CODE } from "../code.ts";
import type { Code } from "../code.ts";
import { AUTHORS } from "../people.ts";
import { SPRING } from "./spring.ts";
import type { PlantKey, Step } from "./step.ts";
import { SUMMER } from "./summer.ts";

export const MAIN = "main";
const HOUR = 60 * 60 * 1000;
/** Hours from one commit to the next: a working rhythm, the same each time. */
const GAPS = [3, 5, 16, 4, 2, 19, 6];

/** A commit of the demo, and the code base as it was then. */
export interface DemoCommit {
  readonly commit: CommitDocument & { readonly sha: string; readonly committedAt: string };
  readonly code: Code;
  readonly lanes: readonly LaneName[];
  readonly plants: PlantKey | null;
}

interface Head {
  readonly sha: string;
  readonly code: Code;
  /** What was set since the branch left main. */
  readonly set: Partial<Code>;
}

/**
 * The scripted history, parents before children, the newest commit an hour before `now` (milliseconds). Hashes come
 * from the commits' content without their dates, so that they are the same at every run.
 */
export function demoHistory(now: number): DemoCommit[] {
  const steps = [...SPRING, ...SUMMER];
  const times = commitTimes(steps.length, now);
  const heads = new Map<string, Head>();
  return steps.map((step, at) => {
    const branch = step.branch ?? MAIN;
    const trunk = heads.get(MAIN);
    const parent = heads.get(branch) ?? (trunk === undefined ? null : { ...trunk, set: {} });
    const merged = step.merges === undefined ? null : heads.get(step.merges)!;
    const set = { ...merged?.set, ...step.set };
    const code = { ...(parent?.code ?? FIRST_CODE), ...set };
    const parents = [parent, merged].flatMap((head) => (head === null ? [] : [head.sha]));
    const sha = hashOf(step, parents);
    heads.set(branch, { sha, code, set: { ...parent?.set, ...set } });
    return {
      commit: {
        sha,
        parents,
        branch,
        subject: step.subject,
        author: AUTHORS[step.by],
        committedAt: new Date(times[at]!).toISOString(),
        changedPaths: [...step.paths],
      },
      code,
      lanes: step.lanes,
      plants: step.plants ?? null,
    };
  });
}

function hashOf({ subject, by, paths, set }: Step, parents: readonly string[]): string {
  return createHash("sha1").update(JSON.stringify({ subject, by, paths, set, parents })).digest("hex");
}

function commitTimes(count: number, now: number): number[] {
  const times = [now - HOUR];
  while (times.length < count) times.unshift(times[0]! - GAPS[times.length % GAPS.length]! * HOUR);
  return times;
}
