import { VERDICT_CODE, VERDICTS } from "../../domain/vocabulary.ts";
import type { BestReference } from "../types.ts";

const { agrees, disagrees, unresolved, unreferenced, invalid } = VERDICT_CODE;

/** Which verdict is shown first, by its code: the highest rank is the worst. */
const RANK = new Uint8Array(VERDICTS.length);
RANK[agrees] = 1;
RANK[unresolved] = 2;
RANK[disagrees] = 3;
RANK[invalid] = 4;

/** What the entries of one block are decided with. */
export interface Limits {
  readonly rtol: number;
  readonly floor: number;
  /** Guard factor g on U before an entry is accused, by source byte. */
  readonly guards: Float64Array;
}

export interface Decided {
  readonly agrees: number;
  readonly disagrees: number;
  readonly unresolved: number;
  readonly unreferenced: number;
  readonly invalid: number;
  /** Index of the worst entry by verdict, then by relative error, then the first; -1 in an empty block. */
  readonly worst: number;
}

/**
 * The kernel of `judgeBlock`: writes verdict and resolution of every entry, counts the verdicts and finds the worst.
 * One pass, nothing is allocated per entry; all arrays have one length.
 */
export function decideEntries(
  derivative: Float64Array,
  best: BestReference,
  limits: Limits,
  verdict: Uint8Array,
  resolution: Float32Array,
): Decided {
  const { value, uncertainty, source, sawNoChange } = best;
  const { rtol, floor, guards } = limits;
  // The next binary32 number up has the next bit pattern; resolutions are never negative.
  const bits = new Int32Array(resolution.buffer, resolution.byteOffset, resolution.length);
  const rounded = new Float32Array(1);
  const roundedBits = new Int32Array(rounded.buffer);
  let agreeing = 0;
  let disagreeing = 0;
  let open = 0;
  let without = 0;
  let worst = -1;
  let worstRank = -1;
  let worstError = 0;
  for (let k = 0; k < derivative.length; k += 1) {
    const a = derivative[k];
    const r = value[k];
    const u = uncertainty[k];
    const size = Math.max(Math.abs(r), floor);
    const tolerance = rtol * size;
    const distance = Math.abs(a - r);
    let code: number;
    if (!(distance < Infinity)) {
      code = decideFar(a, r, u, guards[source[k]], rtol * (size / 2));
      if (code === agrees) agreeing += 1;
      else if (code === disagrees) disagreeing += 1;
      else if (code === unresolved) open += 1;
      else if (code === unreferenced) without += 1;
    } else if (distance + u <= tolerance || (a === 0 && sawNoChange[k] === 1)) {
      code = agrees;
      agreeing += 1;
    } else if (distance - guards[source[k]] * u > tolerance) {
      code = disagrees;
      disagreeing += 1;
    } else {
      code = unresolved;
      open += 1;
    }
    verdict[k] = code;
    const rank = RANK[code];
    if (rank >= worstRank) {
      const error = distance / size;
      if (rank > worstRank || error > worstError) {
        worst = k;
        worstRank = rank;
        worstError = error;
      }
    }
    const relative = size > 0 ? u / size : u > 0 ? Infinity : u;
    rounded[0] = relative;
    bits[k] = roundedBits[0] + (rounded[0] < relative ? 1 : 0);
  }
  return {
    agrees: agreeing,
    disagrees: disagreeing,
    unresolved: open,
    unreferenced: without,
    invalid: derivative.length - agreeing - disagreeing - open - without,
    worst,
  };
}

/** The rare rest: something is not finite, or |a - r| overflows and is compared at half scale. */
function decideFar(a: number, r: number, u: number, guard: number, halfTolerance: number): number {
  if (a - a !== 0) return invalid;
  if (r - r !== 0) return unreferenced;
  const half = Math.abs(a / 2 - r / 2);
  if (half + u / 2 <= halfTolerance) return agrees;
  return half - (guard * u) / 2 > halfTolerance ? disagrees : unresolved;
}
