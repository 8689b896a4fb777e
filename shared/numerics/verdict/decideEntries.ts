import { VERDICT_CODE, VERDICTS } from "../../domain/vocabulary.ts";
import { floored } from "../floored.ts";
import type { BestReference } from "../types.ts";

const { agrees, disagrees, unresolved, unreferenced, invalid } = VERDICT_CODE;

/** Which verdict is shown first, by its code: the highest rank is the worst. */
const RANK = new Uint8Array(VERDICTS.length);
RANK[agrees] = 1;
RANK[unresolved] = 2;
RANK[disagrees] = 3;
RANK[invalid] = 4;

/** One binary32 number and its bits. */
const NEAREST = new Float32Array(1);
const NEAREST_BITS = new Int32Array(NEAREST.buffer);

/** What the entries of one block are decided with and where it is written. */
export interface Decision {
  readonly derivative: Float64Array;
  readonly best: Pick<BestReference, "value" | "source" | "sawNoChange">;
  readonly rtol: number;
  readonly floor: number;
  /** Guard factor g on U before an entry is accused, by source byte. */
  readonly guards: Float64Array;
  readonly verdict: Uint8Array;
  /** U / max(|r|, floor), rounded up to the next binary32 number; 0/0 is 0, U/0 +Infinity, NaN without a reference. */
  readonly resolution: Float32Array;
  readonly tally: Tally;
}

/** Entries per verdict code, and the worst entry by verdict, then by relative error, then the first. */
export interface Tally {
  readonly counts: Float64Array;
  /** Index, -1 before any. */
  worst: number;
  worstRank: number;
  worstError: number;
}

export function newTally(): Tally {
  return { counts: new Float64Array(VERDICTS.length), worst: -1, worstRank: -1, worstError: 0 };
}

/**
 * The kernel of `judgeBlock`: verdict and resolution of the entries start <= k < end, whose U stand at the start of
 * `uncertainty`. One pass, nothing is allocated per entry. Verdicts are worked out as numbers: in a block of mixed
 * verdicts a branch on them would be guessed wrong every other time, which costs more than all the rest.
 * Source of the rounding: IEEE Std 754-2019 (the next number up has the next bit pattern).
 */
export function decideEntries(decision: Decision, uncertainty: Float64Array, start: number, end: number): void {
  const { derivative, rtol, floor, guards, verdict, resolution, tally } = decision;
  const { value, source, sawNoChange } = decision.best;
  const bits = new Int32Array(resolution.buffer, resolution.byteOffset, resolution.length);
  let { worst, worstRank, worstError } = tally;
  let agreeing = 0;
  let accused = 0;
  let rare = 0;
  for (let k = start, j = 0; k < end; k += 1, j += 1) {
    const a = derivative[k];
    const r = value[k];
    const u = uncertainty[j];
    const size = floored(Math.abs(r), floor);
    const relative = u === 0 ? 0 : u / size;
    NEAREST[0] = relative;
    bits[k] = NEAREST_BITS[0] + Number(NEAREST[0] < relative);
    const tolerance = rtol * size;
    const distance = Math.abs(a - r);
    const guard = guards[source[k]];
    const within = Number(distance + u <= tolerance);
    const beyond = Number(distance - guard * u > tolerance);
    // unresolved 2, disagrees 2 - 1, agrees 0.
    let code = (1 - within) * (unresolved - beyond);
    agreeing += within;
    accused += beyond;
    if (!(distance < Infinity) || (a === 0 && sawNoChange[k] === 1)) {
      code = distance < Infinity ? agrees : decideFar(a, r, u, guard, rtol * (size / 2));
      agreeing -= within;
      accused -= beyond;
      rare += 1;
      tally.counts[code] += 1;
    }
    verdict[k] = code;
    const rank = RANK[code];
    const farther = Number(rank === worstRank) & Number(distance > worstError * size);
    if ((Number(rank > worstRank) | farther) === 0) continue;
    worst = k;
    worstRank = rank;
    worstError = distance === 0 ? 0 : distance / size;
  }
  tally.counts[agrees] += agreeing;
  tally.counts[disagrees] += accused;
  tally.counts[unresolved] += end - start - agreeing - accused - rare;
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
