import { MOTION_CODE, VERDICT_CODE, VERDICTS } from "../../domain/vocabulary.ts";
import type { VerdictCounts } from "../types.ts";

/** Age of an entry that was not checked within the limit, or never. */
export const NEVER_CHECKED = 255;
const { unreferenced, unresolved } = VERDICT_CODE;

/** What a build says of its entries once the builds before it were heard. */
export interface CarriedVerdicts {
  /** Verdict of each entry; `unreferenced` where nothing speaks of it any more. */
  readonly verdict: Uint8Array;
  /** Builds since the entry was checked: 0 in this one, NEVER_CHECKED where nothing speaks of it any more. */
  readonly age: Uint8Array;
  readonly counts: VerdictCounts;
  /** Entries whose verdict is that of an earlier build. */
  readonly carried: number;
  /** The largest age among those, 0 if there are none. */
  readonly oldest: number;
}

/** The build before; `age` null: what has a verdict there was checked there. */
export interface VerdictsBefore {
  readonly verdict: Uint8Array;
  readonly age: Uint8Array | null;
}

/**
 * Verdicts of a build that checked some of its entries only. An entry without a reference keeps the verdict of the
 * build before, and its age grows by one; above `limit` (1..254) builds it is `unreferenced`. Where its derivative or its model
 * moved since (by the motion), the old reference cannot tell any more: `unresolved`, neither accused nor acquitted.
 *
 * Shapes: all arrays one byte an entry, codes of VERDICTS and MOTIONS; `motion` null where nothing is known, which is
 * then taken for a move. `before` null: no build before. Ages in builds. NaN policy: no numbers are looked at.
 * Throws: RangeError naming the argument whose length is not that of `verdict`. Cost: one pass, two bytes an entry.
 * Source: the rule of the house (How a build is judged); the three-way decision is that of JCGM 106:2012.
 */
export function carryVerdicts(
  verdict: Uint8Array,
  motion: Uint8Array | null,
  before: VerdictsBefore | null,
  limit: number,
): CarriedVerdicts {
  expectLength("motion", motion, verdict);
  expectLength("before.verdict", before?.verdict ?? null, verdict);
  expectLength("before.age", before?.age ?? null, verdict);
  const carried = verdict.slice();
  const age = new Uint8Array(verdict.length);
  let kept = 0;
  let oldest = 0;
  for (let k = 0; k < verdict.length; k += 1) {
    if (verdict[k] !== unreferenced) continue;
    age[k] = NEVER_CHECKED;
    if (before === null || before.verdict[k] === unreferenced) continue;
    const now = (before.age?.[k] ?? 0) + 1;
    if (now > limit) continue;
    age[k] = now;
    carried[k] = motion !== null && motion[k] === MOTION_CODE.still ? before.verdict[k] : unresolved;
    kept += 1;
    if (age[k] > oldest) oldest = age[k];
  }
  return { verdict: carried, age, counts: countVerdicts(carried), carried: kept, oldest };
}

function countVerdicts(verdict: Uint8Array): VerdictCounts {
  const counts = new Uint32Array(VERDICTS.length);
  for (const code of verdict) counts[code] += 1;
  return {
    entries: verdict.length,
    agrees: counts[VERDICT_CODE.agrees],
    disagrees: counts[VERDICT_CODE.disagrees],
    unresolved: counts[unresolved],
    unreferenced: counts[unreferenced],
    invalid: counts[VERDICT_CODE.invalid],
  };
}

function expectLength(argument: string, bytes: Uint8Array | null, like: Uint8Array): void {
  if (bytes !== null && bytes.length !== like.length) {
    throw new RangeError(`${argument}: ${bytes.length} entries, expected ${like.length}`);
  }
}
