import { Piscina } from "piscina";
import type { StepStudy } from "../../shared/numerics/steps/types.ts";
import type { CoverageTask, JudgedCoverages } from "./judgeCoverage.ts";
import type { DriftTask, JudgedDrift } from "./judgeDrift.ts";
import type { JudgedMotions, MotionTask } from "./judgeMotion.ts";
import type { Posting, JudgedPosting } from "./judgePosting.ts";
import type { StepsTask } from "./judgeSteps.ts";
import type { PostingOutcome } from "./judge.worker.ts";
import { RejectedPosting } from "./rejection.ts";

/** Threads that decode and judge, so that the event loop stays free for pages. */
export interface JudgePool {
  /** Takes the body's memory with it. @throws RejectedPosting */
  posting(task: Posting): Promise<JudgedPosting>;
  motions(tasks: readonly MotionTask[]): Promise<JudgedMotions>;
  coverages(tasks: readonly CoverageTask[]): Promise<JudgedCoverages>;
  /** Results in the order of the tasks. */
  drifts(tasks: readonly DriftTask[]): Promise<readonly JudgedDrift[]>;
  steps(task: StepsTask): Promise<StepStudy>;
  close(): Promise<void>;
}

export function createJudgePool(options: { readonly threads: number }): JudgePool {
  const fromSources = import.meta.url.endsWith(".ts");
  const pool = new Piscina({
    filename: new URL(fromSources ? "./judge.sources.mjs" : "./judge.js", import.meta.url).href,
    minThreads: 1,
    maxThreads: options.threads,
    // A large document leaves a large heap behind: an idle thread is let go, and its memory with it.
    idleTimeout: 10_000,
  });
  return {
    async posting(task) {
      const alone = task.body.byteLength === task.body.buffer.byteLength;
      const transferList = alone ? [task.body.buffer as ArrayBuffer] : [];
      const outcome = (await pool.run(task, { name: "posting", transferList })) as PostingOutcome;
      if ("rejected" in outcome) throw new RejectedPosting(outcome.rejected);
      return outcome.judged;
    },
    motions: (tasks) => pool.run(tasks, { name: "motions" }) as Promise<JudgedMotions>,
    coverages: (tasks) => pool.run(tasks, { name: "coverages" }) as Promise<JudgedCoverages>,
    drifts: (tasks) => pool.run(tasks, { name: "drifts" }) as Promise<readonly JudgedDrift[]>,
    steps: (task) => pool.run(task, { name: "steps" }) as Promise<StepStudy>,
    close: () => pool.close(),
  };
}
