import { isBadVerdict } from "../../../shared/domain/vocabulary.ts";
import type { EntrySeries } from "../history/loadEntrySeries.ts";

/** What a build says of the entry that rose most. */
export interface WorstNow {
  /** Above its baseline; null where the build tells nothing of it. */
  readonly decades: number | null;
  readonly disagrees: boolean;
}

export function worstNow({ builds, drift }: EntrySeries, buildId: number): WorstNow {
  const numbers = builds.find((build) => build.buildId === buildId)?.numbers;
  return {
    decades: drift.get(buildId)?.decades ?? null,
    disagrees: numbers !== undefined && isBadVerdict(numbers.verdict),
  };
}
