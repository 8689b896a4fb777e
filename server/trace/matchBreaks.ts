import { sharedEntries } from "../record/entryList.ts";
import type { StoredTrace } from "./storedTrace.ts";
import type { BreakPart, LaneBreak } from "./traceLane.ts";

/** A break as the record has it. */
export interface RecordedBreak {
  readonly id: number;
  readonly onset: string;
  readonly onsetBuildId: number;
  readonly repairedBy: string | null;
  readonly trace: StoredTrace;
  readonly parts: readonly BreakPart[];
}

export interface Matches {
  /** For each traced break, in order, the recorded one that it is, or null where it is new. */
  readonly recordedOf: readonly (RecordedBreak | null)[];
  /** Recorded breaks that are none any more, with the index of the traced break that took their entries, or null. */
  readonly gone: readonly { readonly recorded: RecordedBreak; readonly successor: number | null }[];
}

/**
 * Which of the traced breaks are known already. A late build may move an onset back, split a break or join two: a
 * traced break is the recorded one of the same onset with which it shares most entries; failing that, one whose onset
 * is among its bad commits. Every recorded break is matched at most once.
 */
export function matchBreaks(recorded: readonly RecordedBreak[], traced: readonly LaneBreak[]): Matches {
  const pairs = recorded.flatMap((old) =>
    traced.flatMap((now, at) => {
      if (old.onset !== now.onset && !now.bad.includes(old.onset)) return [];
      const shared = sharedParts(old.parts, now.parts);
      return shared === 0 ? [] : [{ old, at, shared, sameOnset: old.onset === now.onset }];
    }),
  );
  pairs.sort((a, b) => Number(b.sameOnset) - Number(a.sameOnset) || b.shared - a.shared || a.old.id - b.old.id);
  const recordedOf = new Array<RecordedBreak | null>(traced.length).fill(null);
  const taken = new Set<RecordedBreak>();
  for (const { old, at } of pairs) {
    if (recordedOf[at] !== null || taken.has(old)) continue;
    recordedOf[at] = old;
    taken.add(old);
  }
  const gone = recorded
    .filter((old) => !taken.has(old))
    .map((old) => ({ recorded: old, successor: pairs.find((pair) => pair.old === old)?.at ?? null }));
  return { recordedOf, gone };
}

function sharedParts(a: readonly BreakPart[], b: readonly BreakPart[]): number {
  return a.reduce((sum, part) => {
    const other = b.find(({ blockId, columns }) => blockId === part.blockId && columns === part.columns);
    return sum + (other ? sharedEntries(part.entries, other.entries) : 0);
  }, 0);
}

/** True where a repaired break is told exactly as it was: nothing of it has to be read or written again. */
export function isSettled(recorded: RecordedBreak, found: LaneBreak, onsetBuildId: number): boolean {
  const { trace } = recorded;
  return (
    found.repairedBy !== null &&
    recorded.repairedBy === found.repairedBy &&
    recorded.onset === found.onset &&
    recorded.onsetBuildId === onsetBuildId &&
    trace.bad.join() === found.bad.join() &&
    trace.suspects.length === found.suspects.length &&
    trace.suspects.every(({ sha }) => found.suspects.includes(sha)) &&
    sameParts(recorded.parts, found.parts)
  );
}

export function sameParts(a: readonly BreakPart[], b: readonly BreakPart[]): boolean {
  const key = (parts: readonly BreakPart[]) =>
    parts
      .map((part) => `${part.blockId} ${part.columns} ${part.entries.join()}`)
      .sort()
      .join(";");
  return key(a) === key(b);
}
