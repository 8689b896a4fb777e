import { packEntries, sharedEntries } from "../record/entryList.ts";
import type { BreakPart, LaneBreak } from "./traceLane.ts";

/** What tracing has to know of a break in the record, to find it again. */
export interface KnownBreak {
  readonly id: number;
  readonly onset: string;
  readonly parts: readonly BreakPart[];
}

export interface Matches<B extends KnownBreak> {
  /** For each traced break, in order, the recorded one that it is, or null where it is new. */
  readonly recordedOf: readonly (B | null)[];
  /** Recorded breaks that are none any more, with the index of the traced break that took their entries, or null. */
  readonly gone: readonly { readonly recorded: B; readonly successor: number | null }[];
}

/**
 * Which of the traced breaks are known already. A late build may move an onset back, split a break or join two: a
 * traced break is the recorded one of the same onset with which it shares most entries; failing that, one whose onset
 * is among its bad commits. Every recorded break is matched at most once.
 */
export function matchBreaks<B extends KnownBreak>(
  recorded: readonly B[],
  traced: readonly Pick<LaneBreak, "onset" | "bad" | "parts">[],
): Matches<B> {
  const pairs = recorded.flatMap((old) =>
    traced.flatMap((now, at) => {
      if (old.onset !== now.onset && !now.bad.includes(old.onset)) return [];
      const shared = sharedParts(old.parts, now.parts);
      return shared === 0 ? [] : [{ old, at, shared, sameOnset: old.onset === now.onset }];
    }),
  );
  pairs.sort((a, b) => Number(b.sameOnset) - Number(a.sameOnset) || b.shared - a.shared || a.old.id - b.old.id);
  const recordedOf = new Array<B | null>(traced.length).fill(null);
  const taken = new Set<B>();
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

/** True where both hold the same entries of the same blocks, in whatever order the blocks are told. */
export function sameParts(a: readonly BreakPart[], b: readonly BreakPart[]): boolean {
  return (
    a.length === b.length &&
    a.every((part) => {
      const other = b.find(({ blockId, columns }) => blockId === part.blockId && columns === part.columns);
      return other !== undefined && packEntries(other.entries).equals(packEntries(part.entries));
    })
  );
}
