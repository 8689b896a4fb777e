import { Piscina } from "piscina";
import type { StepStudy } from "../../shared/numerics/steps/types.ts";
import type { CoverageTask, JudgedCoverage } from "./judgeCoverage.ts";
import type { DriftTask, JudgedDrift } from "./judgeDrift.ts";
import type { JudgedMotion, MotionTask } from "./judgeMotion.ts";
import type { Posting, JudgedPosting } from "./judgePosting.ts";
import type { StepsTask } from "./judgeSteps.ts";
import type { PostingOutcome } from "./judge.worker.ts";
import { RejectedPosting } from "./rejection.ts";

/** Threads that decode and judge, so that the event loop stays free for pages. */
export interface JudgePool {
  /** Takes the body's memory with it. @throws RejectedPosting */
  posting(task: Posting): Promise<JudgedPosting>;
  motion(task: MotionTask): Promise<JudgedMotion>;
  coverage(task: CoverageTask): Promise<JudgedCoverage | null>;
  drift(task: DriftTask): Promise<JudgedDrift>;
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
    motion: (task) => pool.run(task, { name: "motion" }) as Promise<JudgedMotion>,
    coverage: (task) => pool.run(task, { name: "coverage" }) as Promise<JudgedCoverage | null>,
    drift: (task) => pool.run(task, { name: "drift" }) as Promise<JudgedDrift>,
    steps: (task) => pool.run(task, { name: "steps" }) as Promise<StepStudy>,
    close: () => pool.close(),
  };
}
