import type { Reader } from "../../db/reader.ts";
import { madeAt } from "../../record/laneBuilds.ts";

const DAY = 24 * 60 * 60 * 1000;
/** A lane is silent after so many times its usual gap. */
const GAPS = 3;
/** Fewer builds have no rhythm to fall out of. */
const FEWEST_BUILDS = 4;

export interface SilentLane {
  readonly projectId: number;
  readonly laneId: number;
  readonly lane: string;
  /** Milliseconds since 1970. */
  readonly lastBuildAt: number;
  /** Sha of the commit of that build. */
  readonly lastCommit: string;
}

/**
 * Lanes that had a rhythm and lost it: no build for three times their median gap, and for a day at least. Gaps are
 * between the commits' builds by the time that they were made for, so that a history posted at once has a rhythm too.
 */
export async function loadSilentLanes(
  reader: Reader,
  projectIds: readonly number[],
  now: number,
): Promise<SilentLane[]> {
  const rows = await reader.select<{
    projectId: number;
    laneId: number;
    lane: string;
    times: string;
    lastCommit: string;
  }>(
    `SELECT l.projectId, l.id AS laneId, l.name AS lane, json_group_array(b.at ORDER BY b.at) AS times,
       (SELECT c.sha FROM builds o JOIN commits c ON c.id = o.commitId WHERE o.laneId = l.id AND o.state = 'complete'
        ORDER BY ${madeAt("o")} DESC LIMIT 1) AS lastCommit
     FROM lanes l JOIN (SELECT laneId, ${madeAt("builds")} AS at FROM builds WHERE state = 'complete') b ON b.laneId = l.id
     WHERE l.projectId IN (SELECT value FROM json_each($1)) GROUP BY l.id ORDER BY l.name`,
    [JSON.stringify(projectIds)],
  );
  return rows.flatMap(({ times, ...lane }) => {
    const moments = JSON.parse(times) as number[];
    const lastBuildAt = moments[moments.length - 1];
    return isSilent(moments, now) ? [{ ...lane, lastBuildAt }] : [];
  });
}

/** `moments` ascending, in milliseconds. */
export function isSilent(moments: readonly number[], now: number): boolean {
  if (moments.length < FEWEST_BUILDS) return false;
  const gaps = moments.slice(1).map((moment, at) => moment - moments[at]);
  const usual = gaps.sort((a, b) => a - b)[Math.floor(gaps.length / 2)];
  return now - moments[moments.length - 1] > Math.max(DAY, GAPS * usual);
}
