import type { Motion } from "../../shared/domain/vocabulary.ts";
import type { OnsetKind } from "../../shared/history/types.ts";
import type { Writer } from "../db/write.ts";
import { packEntries, unpackEntries } from "../record/entryList.ts";
import type { BreakDescription } from "./describeBreak.ts";
import { sameParts } from "./matchBreaks.ts";
import type { KnownBreak } from "./matchBreaks.ts";
import type { StoredBreakWorst, StoredTrace } from "./storedTrace.ts";
import type { BreakPart, LaneBreak } from "./traceLane.ts";

/** The columns that tracing tells of a break: all but its identity and what people add to it. */
export interface ToldColumns {
  readonly state: "open" | "repaired";
  readonly kind: OnsetKind;
  readonly onset: string;
  readonly onsetBuildId: number;
  readonly lastGood: string | null;
  readonly lastGoodBuildId: number | null;
  readonly repairedBy: string | null;
  readonly repairedByBuildId: number | null;
  /** JSON: StoredTrace. */
  readonly trace: string;
  /** JSON: string[]. */
  readonly models: string;
  readonly entryCount: number;
  /** JSON: StoredBreakWorst. */
  readonly worst: string;
  readonly motion: Motion | null;
}
const TOLD = [
  "state",
  "kind",
  "onset",
  "onsetBuildId",
  "lastGood",
  "lastGoodBuildId",
  "repairedBy",
  "repairedByBuildId",
  "trace",
  "models",
  "entryCount",
  "worst",
  "motion",
] as const satisfies readonly (keyof ToldColumns)[];

/** A break as the record has it. */
export interface RecordedBreak extends KnownBreak {
  readonly told: ToldColumns;
}

type RecordedPart = ToldColumns & {
  readonly id: number;
  readonly blockId: number;
  readonly columns: number;
  readonly entries: Buffer;
};

/** The lane's breaks as the record has them, withdrawn ones aside. */
export async function loadRecordedBreaks(w: Writer, laneId: number): Promise<RecordedBreak[]> {
  const rows = await w.select<RecordedPart>(
    `SELECT b.id, ${TOLD.map((name) => `b.${name}`).join(", ")}, e.blockId, e.columnCount AS columns, e.entries
     FROM breaks b JOIN break_entries e ON e.breakId = b.id
     WHERE b.laneId = $1 AND b.withdrawnAt IS NULL ORDER BY b.id, e.blockId, e.columnCount`,
    [laneId],
  );
  const breaks = new Map<number, RecordedBreak & { readonly parts: BreakPart[] }>();
  for (const { id, blockId, columns, entries, ...told } of rows) {
    const known = breaks.get(id) ?? { id, onset: told.onset, told, parts: [] };
    breaks.set(id, known);
    known.parts.push({ blockId, columns, entries: unpackEntries(entries) });
  }
  return [...breaks.values()];
}

/** The description as it was told when the break was written last. */
export function recordedDescription({ told }: RecordedBreak): BreakDescription {
  return {
    models: JSON.parse(told.models) as string[],
    sources: (JSON.parse(told.trace) as StoredTrace).sources,
    worst: JSON.parse(told.worst) as StoredBreakWorst,
    motion: told.motion,
  };
}

export interface DescribedBreak {
  readonly found: LaneBreak;
  readonly description: BreakDescription;
  readonly trace: StoredTrace;
  /** Builds that speak for the commits of the break. */
  readonly onsetBuildId: number;
  readonly lastGoodBuildId: number | null;
  readonly repairedByBuildId: number | null;
}

/**
 * Writes a break over the recorded one where anything of it is new, or as a new one with the project's next number;
 * answers with its id.
 */
export async function storeBreak(
  w: Writer,
  place: { readonly projectId: number; readonly laneId: number },
  described: DescribedBreak,
  recorded: RecordedBreak | null,
  now: number,
): Promise<number> {
  const { found, description, trace } = described;
  const told: ToldColumns = {
    state: found.state,
    kind: found.kind,
    onset: found.onset,
    onsetBuildId: described.onsetBuildId,
    lastGood: found.lastGood,
    lastGoodBuildId: described.lastGoodBuildId,
    repairedBy: found.repairedBy,
    repairedByBuildId: described.repairedByBuildId,
    trace: JSON.stringify(trace),
    models: JSON.stringify(description.models),
    entryCount: found.entryCount,
    worst: JSON.stringify(description.worst),
    motion: description.motion,
  };
  const bound = TOLD.map((name) => told[name]);
  if (recorded !== null) {
    if (TOLD.some((name) => told[name] !== recorded.told[name])) {
      const assignments = TOLD.map((name, at) => `${name} = $${at + 2}`).join(", ");
      await w.run(`UPDATE breaks SET ${assignments} WHERE id = $1`, [recorded.id, ...bound]);
    }
    if (!sameParts(recorded.parts, found.parts)) await storeParts(w, recorded.id, found.parts);
    return recorded.id;
  }
  const marks = TOLD.map((_, at) => `$${at + 4}`).join(", ");
  await w.run(
    `INSERT INTO breaks (projectId, laneId, createdAt, number, ${TOLD.join(", ")})
     SELECT $1, $2, $3, COALESCE(max(number), 0) + 1, ${marks} FROM breaks WHERE projectId = $1`,
    [place.projectId, place.laneId, now, ...bound],
  );
  const [{ id }] = await w.select<{ id: number }>("SELECT max(id) AS id FROM breaks WHERE laneId = $1", [place.laneId]);
  await storeParts(w, id, found.parts);
  return id;
}

async function storeParts(w: Writer, breakId: number, parts: readonly BreakPart[]): Promise<void> {
  await w.run("DELETE FROM break_entries WHERE breakId = $1", [breakId]);
  await w.insertOrIgnore(
    "break_entries",
    ["breakId", "blockId", "columnCount", "entries"],
    parts.map((part) => [breakId, part.blockId, part.columns, packEntries(part.entries)]),
  );
}

/** A break that later builds showed to be part of another, or none: its comments go to the one that took its entries. */
export async function withdrawBreak(
  w: Writer,
  breakId: number,
  successorId: number | null,
  now: number,
): Promise<void> {
  await w.run("UPDATE breaks SET withdrawnAt = $2, supersededById = $3 WHERE id = $1", [breakId, now, successorId]);
  if (successorId !== null) {
    await w.run("UPDATE comments SET breakId = $2 WHERE breakId = $1", [breakId, successorId]);
  }
}
