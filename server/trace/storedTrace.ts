import type { FixedBetween, NextTest, SuspectScore } from "../../shared/history/types.ts";
import type { StoredWorst } from "../ingest/judgePosting.ts";

/** JSON of a break's `trace` column: what its tracing found, recomputed whenever the lane changes. */
export interface StoredTrace {
  /** Most likely first. */
  readonly suspects: readonly SuspectScore[];
  readonly nextTest: NextTest | null;
  readonly fixedBetween: FixedBetween | null;
  readonly historyIncomplete: boolean;
  /** Sources of the blocks, as the build of the onset told them. */
  readonly sources: readonly string[];
  /** Every tested bad commit of the break, oldest first. */
  readonly bad: readonly string[];
}

/** JSON of a break's `worst` column: its worst entry at the onset. */
export interface StoredBreakWorst extends StoredWorst {
  readonly blockId: number;
}
