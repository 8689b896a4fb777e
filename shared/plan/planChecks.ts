import { rotationPromise } from "./rotationPromise.ts";
import type { Plan, PlanColumn } from "./types.ts";

/** Costs are counted in whole parts of the budget, so that sums are exact and the promise does not hang on rounding. */
const PARTS = 2 ** 36;
/** What the rotation spends before the rest goes where a check is worth most. */
const RESERVE = PARTS / 2;

/**
 * Which columns the next build should check with its budget, and within how many builds all will have been checked.
 *
 * Two purses. One goes round: columns in the order of their waiting (equal ones by block and column) until half of the
 * budget is spent or the next does not fit into the whole. What remains buys, of all other columns, those of most value
 * per cost first, passing over what no longer fits.
 *
 * The promise `everyBuilds`: if every build follows its plan with this budget, and costs stay as they are, each column
 * is checked within so many builds from now, and again within so many from then, whatever values there are. Why: what
 * stands before a column in the queue can only become less (a checked column goes to the end, a new one has waited 0),
 * and with columns taken out of a queue, or from a later place in it, a build's half reaches as far or further;
 * `rotationPromise` bounds the builds for any order. New columns make later promises longer, not the ones given.
 *
 * Shapes: any number of columns. Units: costs and budget in one and the same. Domain: budget finite and > 0; costs,
 * waits and values >= 0 and finite.
 * Throws: RangeError naming the column that is not so. NaN policy: NaN is refused.
 * Accuracy: `spent` may exceed the budget by 2^-36 of it for each chosen column; the promise is exact up to 32,768.
 * Cost: O(n log n), a few numbers a column.
 */
export function planChecks(columns: readonly PlanColumn[], budget: number): Plan {
  if (!(budget > 0 && budget < Infinity)) throw new RangeError("budget must be a finite number above 0");
  const parts = Float64Array.from(columns, (column) => partsOf(column, budget));
  const affordable = Uint32Array.from(columns.keys()).filter((at) => parts[at] <= PARTS);
  const queue = affordable.toSorted((a, b) => waitedLonger(columns[a], columns[b]));
  const taken = new Uint8Array(columns.length);
  const forRotation = takeRotation(queue, parts, taken);
  const byWorth = byWorthPerCost(queue, columns, parts);
  takeWhatFits(byWorth, parts, taken, PARTS - forRotation);
  const chosen = Array.from(byWorth.filter((at) => taken[at] === 1));
  const dear = affordable.length < columns.length;
  return {
    chosen,
    left: Array.from(queue.filter((at) => taken[at] === 0)),
    tooDear: dear ? [...columns.keys()].filter((at) => parts[at] > PARTS) : [],
    spent: chosen.reduce((sum, at) => sum + columns[at].cost, 0),
    everyBuilds: dear ? null : rotationPromise(parts, PARTS, RESERVE),
  };
}

function partsOf({ block, column, cost, waited, value }: PlanColumn, budget: number): number {
  const right = cost >= 0 && waited >= 0 && waited < Infinity && value >= 0 && value < Infinity;
  if (!right) {
    throw new RangeError(`column ${column} of block ${block} must have a cost, wait and value of at least 0`);
  }
  if (cost === 0) return 0;
  // Down, so that ten columns of 0.1 fit into 1.
  return Math.max(1, Math.floor((cost / budget) * PARTS));
}

/** Longest waiting first; the rest of the order is fixed, so that the queue keeps its order from build to build. */
function waitedLonger(a: PlanColumn, b: PlanColumn): number {
  return b.waited - a.waited || a.block - b.block || a.column - b.column;
}

/** Takes from the head of the queue; answers with what that costs. */
function takeRotation(queue: Uint32Array, parts: Float64Array, taken: Uint8Array): number {
  let spent = 0;
  for (const at of queue) {
    if (spent >= RESERVE || spent + parts[at] > PARTS) break;
    spent += parts[at];
    taken[at] = 1;
  }
  return spent;
}

function byWorthPerCost(queue: Uint32Array, columns: readonly PlanColumn[], parts: Float64Array): Uint32Array {
  const worth = new Float64Array(columns.length);
  const place = new Uint32Array(columns.length);
  queue.forEach((at, rank) => {
    place[at] = rank;
    // What costs nothing is worth it at once.
    worth[at] = columns[at].value === 0 ? 0 : columns[at].value / parts[at];
  });
  return queue.toSorted((a, b) => (worth[a] === worth[b] ? place[a] - place[b] : worth[b] - worth[a]));
}

function takeWhatFits(order: Uint32Array, parts: Float64Array, taken: Uint8Array, purse: number): void {
  let remaining = purse;
  for (const at of order) {
    if (taken[at] === 1 || parts[at] > remaining) continue;
    remaining -= parts[at];
    taken[at] = 1;
  }
}
