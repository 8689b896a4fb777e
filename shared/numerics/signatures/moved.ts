import { explain } from "./explain.ts";
import { isWithin, slackOf } from "./slack.ts";
import type { Evidence, Match, Trial } from "./types.ts";

/** Part of the entries that do not disagree that may contradict a candidate which moves the whole block. */
const MOST_CONTRADICTING = 0.05;

/** True where entry k holds the reference of entry `from`, within that one's U + T; also where either is unknown. */
export function holds(evidence: Evidence, k: number, from: number): boolean {
  const { derivative, reference, resolution } = evidence;
  const a = derivative[k];
  const r = reference[from];
  if (r !== r || a - a !== 0 || resolution[from] === Infinity) return true;
  return isWithin(a, r, slackOf(evidence, from));
}

/** As `holds` for an entry that does not disagree: its own reference may be coarse as well. */
function isConsistent(evidence: Evidence, k: number, from: number): boolean {
  if (holds(evidence, k, from)) return true;
  const own = slackOf(evidence, k);
  return own !== own || isWithin(evidence.derivative[k], evidence.reference[from], slackOf(evidence, from) + own);
}

/**
 * The match of a candidate that puts the reference of entry `sourceOf(k)` into every entry k of the block. What does
 * not disagree must bear it out, so that two entries that happen to have changed places are no transposition.
 */
export function movedWhole(
  { evidence, entries }: Trial,
  sourceOf: (k: number) => number,
  rest: Pick<Match, "code" | "parameters" | "say" | "alternatives">,
): Match | null {
  if (entries.length < 2) return null;
  const explanation = explain(entries, (k) => holds(evidence, k, sourceOf(k)));
  if (explanation === null) return null;
  const count = evidence.rows * evidence.columns;
  const most = MOST_CONTRADICTING * (count - entries.length);
  let contradicting = 0;
  for (let k = 0, at = 0; k < count; k += 1) {
    if (entries[at] === k) at += 1;
    else if (!isConsistent(evidence, k, sourceOf(k))) contradicting += 1;
    if (contradicting > most) return null;
  }
  return { ...rest, explained: explanation.explained, settled: entries };
}
