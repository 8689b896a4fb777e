import { move, transferableSymbol, valueSymbol } from "piscina";
import type { StepStudy } from "../../shared/numerics/steps/types.ts";
import { collectGarbage } from "./collectGarbage.ts";
import { judgeCoverages } from "./judgeCoverage.ts";
import type { CoverageTask, JudgedCoverages } from "./judgeCoverage.ts";
import { judgeDrift } from "./judgeDrift.ts";
import type { DriftTask, JudgedDrift } from "./judgeDrift.ts";
import { judgeMotions } from "./judgeMotion.ts";
import type { JudgedMotions, MotionTask } from "./judgeMotion.ts";
import { judgePosting } from "./judgePosting.ts";
import type { JudgedPosting, Posting } from "./judgePosting.ts";
import { judgeSteps } from "./judgeSteps.ts";
import type { StepsTask } from "./judgeSteps.ts";
import { RejectedPosting } from "./rejection.ts";
import type { Rejection } from "./rejection.ts";
import { transferListOf } from "./tileSet.ts";

/** Errors lose their class between threads, so a rejection crosses as a value. */
export type PostingOutcome = { readonly rejected: Rejection } | { readonly judged: JudgedPosting };

export function posting(task: Posting): PostingOutcome {
  try {
    const judged = judgePosting(task);
    // When the answer is on its way: what was made on the way to it.
    setImmediate(collectGarbage, judged.bytes);
    return handOver({ judged }, transferListOf(judged.tiles));
  } catch (error) {
    if (error instanceof RejectedPosting) return { rejected: error.rejection };
    throw error;
  }
}

export function motions(tasks: readonly MotionTask[]): JudgedMotions {
  const judged = judgeMotions(tasks);
  return handOver(judged, transferListOf(judged.tiles));
}

export function coverages(tasks: readonly CoverageTask[]): JudgedCoverages {
  const judged = judgeCoverages(tasks);
  return handOver(judged, transferListOf(judged.tiles));
}

export function drifts(tasks: readonly DriftTask[]): readonly JudgedDrift[] {
  const judged = tasks.map(judgeDrift);
  return handOver(
    judged,
    judged.map(({ state }) => state.buffer as ArrayBuffer),
  );
}

export function steps(task: StepsTask): StepStudy {
  return judgeSteps(task);
}

/** Gives memory to the other thread instead of copying it: what the pool's caller receives is `value`. */
function handOver<T>(value: T, memory: readonly ArrayBuffer[]): T {
  const movable = { [transferableSymbol]: memory, [valueSymbol]: value };
  return move(movable as never) as T;
}
