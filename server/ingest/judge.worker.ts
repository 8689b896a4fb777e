import { move, transferableSymbol, valueSymbol } from "piscina";
import { collectGarbage } from "./collectGarbage.ts";
import { judgeCoverage } from "./judgeCoverage.ts";
import type { CoverageTask, JudgedCoverage } from "./judgeCoverage.ts";
import { judgeMotion } from "./judgeMotion.ts";
import type { JudgedMotion, MotionTask } from "./judgeMotion.ts";
import { judgePosting } from "./judgePosting.ts";
import type { JudgedPosting, Posting } from "./judgePosting.ts";
import { RejectedPosting } from "./rejection.ts";
import type { Rejection } from "./rejection.ts";
import { transferListOf } from "./tileSet.ts";
import type { PackedTiles } from "./tileSet.ts";

/** Errors lose their class between threads, so a rejection crosses as a value. */
export type PostingOutcome = { readonly rejected: Rejection } | { readonly judged: JudgedPosting };

export function posting(task: Posting): PostingOutcome {
  try {
    const judged = judgePosting(task);
    // When the answer is on its way: what was made on the way to it.
    setImmediate(collectGarbage, judged.bytes);
    return handOver({ judged }, judged.tiles);
  } catch (error) {
    if (error instanceof RejectedPosting) return { rejected: error.rejection };
    throw error;
  }
}

export function motion(task: MotionTask): JudgedMotion {
  const judged = judgeMotion(task);
  return handOver(judged, judged.tiles);
}

export function coverage(task: CoverageTask): JudgedCoverage | null {
  const judged = judgeCoverage(task);
  return judged && handOver(judged, judged.tiles);
}

/** Gives the tiles to the other thread instead of copying them: what the pool's caller receives is `value`. */
function handOver<T>(value: T, tiles: PackedTiles): T {
  const movable = { [transferableSymbol]: transferListOf(tiles), [valueSymbol]: value };
  return move(movable as never) as T;
}
