import type { ClimbGroup } from "../../../shared/history/groupClimbs.ts";
import type { Overview } from "../../../shared/schemas/project.ts";
import type { Reader } from "../../db/reader.ts";
import { loadClimbsAt } from "../climbs/loadClimbs.ts";
import type { ClimbLane } from "../climbs/loadClimbs.ts";
import { climbSentence } from "../climbs/sentence.ts";
import { loadBeyond } from "../climbs/loadBeyond.ts";
import { loadEntrySeries } from "../history/loadEntrySeries.ts";

/** Most climbs whose worst entry is looked up; further ones are told with the decades they were found with. */
const MOST_LOOKED_UP = 12;

/** What creeps as seen from a commit: open climbs, and jumps that its own build told. */
export async function climbsAt(reader: Reader, lane: ClimbLane, commit: string): Promise<Overview["climbs"]> {
  const { groups, chain, until } = await loadClimbsAt(reader, lane, commit);
  const shown = groups.filter(({ kind, openCount, worst }) =>
    kind === "climb" ? openCount > 0 : chain[worst.told].sha === commit,
  );
  const rows: Overview["climbs"] = [];
  for (const [at, group] of shown.entries()) {
    const { kind, model, entryCount, openCount, worst } = group;
    const now = at < MOST_LOOKED_UP && kind === "climb" ? await decadesNow(reader, lane, group, chain[until].id) : null;
    const decades = now ?? worst.decades;
    const builds = until - worst.onset + 1;
    const { blockId, worstEntry, columns } = worst;
    rows.push({
      kind,
      jumped: group.jumped,
      model,
      decades,
      builds,
      entryCount: kind === "jump" ? entryCount : openCount,
      sentence: climbSentence({
        kind,
        open: openCount > 0,
        jumped: group.jumped,
        model,
        partials: entryCount - group.probes.length,
        probes: group.probes,
        decades,
        builds,
        beyond: await loadBeyond(reader, group, chain[until].id),
      }),
      onset: chain[worst.onset].sha,
      toldBy: chain[worst.told].sha,
      worst: { blockId: String(blockId), row: Math.floor(worstEntry / columns), column: worstEntry % columns },
    });
  }
  return rows;
}

async function decadesNow(
  reader: Reader,
  { projectId, laneId }: ClimbLane,
  { worst }: ClimbGroup,
  buildId: number,
): Promise<number | null> {
  const { blockId, worstEntry, columns } = worst;
  const entry = { row: Math.floor(worstEntry / columns), column: worstEntry % columns };
  const series = await loadEntrySeries(reader, { projectId, laneId, blockId, ...entry });
  return series.drift.get(buildId)?.decades ?? null;
}
