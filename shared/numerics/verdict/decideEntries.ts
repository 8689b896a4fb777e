import { VERDICT_CODE, VERDICTS } from "../../domain/vocabulary.ts";
import type { BestReference } from "../types.ts";

const { agrees, disagrees, unresolved, unreferenced, invalid } = VERDICT_CODE;

/** Which verdict is shown first, by its code: the highest rank is the worst. */
const RANK = new Uint8Array(VERDICTS.length);
RANK[agrees] = 1;
RANK[unresolved] = 2;
RANK[disagrees] = 3;
RANK[invalid] = 4;

/** What the entries of one block are decided with and where it is written. */
export interface Decision {
  readonly derivative: Float64Array;
  readonly best: Pick<BestReference, "value" | "source" | "sawNoChange">;
  readonly rtol: number;
  readonly floor: number;
  /** Guard factor g on U before an entry is accused, by source byte. */
  readonly guards: Float64Array;
  /** The one guard factor of a block with one reference, 0 where they differ; spares a look at each source byte. */
  readonly soleGuard: number;
  readonly verdict: Uint8Array;
  readonly tally: Tally;
}

/** Entries per verdict code, and the worst entry by verdict, then by relative error, then the first. */
export interface Tally {
  readonly counts: Uint32Array;
  /** Index, -1 before any. */
  worst: number;
  worstRank: number;
  worstError: number;
}

export function newTally(): Tally {
  return { counts: new Uint32Array(VERDICTS.length), worst: -1, worstRank: -1, worstError: 0 };
}

/**
 * The kernel of `judgeBlock`: verdict of the entries start <= k < end, whose U stand at the start of `uncertainty`.
 * One pass, nothing is allocated per entry. Verdicts and the test for the worst entry are worked out as numbers: in a
 * block of mixed verdicts a branch on them would be guessed wrong every other time, which costs more than all the rest.
 */
export function decideEntries(decision: Decision, uncertainty: Float64Array, start: number, end: number): void {
  const { derivative, rtol, floor, guards, soleGuard, verdict, tally } = decision;
  const { value, source, sawNoChange } = decision.best;
  const { counts } = tally;
  let { worst, worstRank, worstError } = tally;
  for (let k = start, j = 0; k < end; k += 1, j += 1) {
    const a = derivative[k];
    const r = value[k];
    const u = uncertainty[j];
    const size = Math.max(Math.abs(r), floor);
    const tolerance = rtol * size;
    const distance = Math.abs(a - r);
    const guard = soleGuard > 0 ? soleGuard : guards[source[k]];
    const within = Number(distance + u <= tolerance);
    const beyond = Number(distance - guard * u > tolerance);
    // unresolved 2, disagrees 2 - 1, agrees 0.
    let code = (1 - within) * (unresolved - beyond);
    if (!(distance < Infinity)) code = decideFar(a, r, u, guards[source[k]], rtol * (size / 2));
    else if (a === 0 && code !== agrees && sawNoChange[k] === 1) code = agrees;
    verdict[k] = code;
    counts[code] += 1;
    const rank = RANK[code];
    const farther = Number(rank === worstRank) & Number(distance > worstError * size);
    if ((Number(rank > worstRank) | farther) === 0) continue;
    worst = k;
    worstRank = rank;
    worstError = distance === 0 ? 0 : distance / size;
  }
  tally.worst = worst;
  tally.worstRank = worstRank;
  tally.worstError = worstError;
}

/** The rare rest: something is not finite, or |a - r| overflows and is compared at half scale. */
function decideFar(a: number, r: number, u: number, guard: number, halfTolerance: number): number {
  if (a - a !== 0) return invalid;
  if (r - r !== 0) return unreferenced;
  const half = Math.abs(a / 2 - r / 2);
  if (half + u / 2 <= halfTolerance) return agrees;
  return half - (guard * u) / 2 > halfTolerance ? disagrees : unresolved;
}
