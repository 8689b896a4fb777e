import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { blockMotion } from "../../shared/numerics/motion/blockMotion.ts";
import type { BlockNumbers, JudgedBlock, MotionSide } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";

const GOAL = 6;
const RUNS = 40;
/** Runs before those that count: a server has been judging for a while, and its code is compiled. */
const WARM_UP = 30;

/** Numbers between 0 and 1 that are the same in every run. */
function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

/** A block whose derivative is right to 1e-9, with one forward difference, all values new in every build. */
export function makeBlock(rows: number, columns: number, build: number): BlockNumbers {
  const random = generator(build);
  const truth = generator(99);
  const derivative = new Float64Array(rows * columns);
  const values = new Float64Array(rows * columns);
  for (let k = 0; k < derivative.length; k += 1) {
    const exact = 10 ** (4 * truth() - 2) * (truth() < 0.5 ? -1 : 1);
    derivative[k] = exact * (1 + 1e-9 * (random() - 0.5));
    values[k] = exact * (1 + 1e-8 * (random() - 0.5));
  }
  return {
    rows,
    columns,
    outputValues: Float64Array.from({ length: rows }, () => 1 + random()),
    inputValues: Float64Array.from({ length: columns }, () => 1 + random()),
    derivative,
    references: [
      {
        method: "forward-difference",
        stepKind: "relative",
        precision: null,
        columns: null,
        steps: [{ step: 1e-8, values }],
        uncertainty: null,
        notFinite: 0,
      },
    ],
  };
}

function sideOf(block: BlockNumbers, judged: JudgedBlock): MotionSide & { readonly verdict: Uint8Array } {
  return {
    derivative: block.derivative,
    reference: judged.best.value,
    resolution: judged.resolution,
    floor: judged.floor,
    outputValues: block.outputValues,
    verdict: judged.verdict,
  };
}

/** The yardstick: |a - r| / max(|r|, floor) of every entry and nothing else; it allocates its result as the judge does. */
function bareLoop(derivative: Float64Array, reference: Float64Array, floor: number): Float64Array {
  const errors = new Float64Array(derivative.length);
  for (let k = 0; k < derivative.length; k += 1) {
    errors[k] = Math.abs(derivative[k] - reference[k]) / Math.max(Math.abs(reference[k]), floor);
  }
  return errors;
}

function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)];
}

/** Milliseconds of processor time: on a shared machine the clock would tell how often others were let in. */
export function timed(work: () => void): number {
  const start = process.cpuUsage();
  work();
  const { user, system } = process.cpuUsage(start);
  return (user + system) / 1000;
}

/** Prints how judging 1,000,000 entries compares with a bare loop over them, and judges 10,000,000 once. */
export async function run(): Promise<void> {
  const before = makeBlock(1000, 1000, 1);
  const now = makeBlock(1000, 1000, 2);
  const ancestor = sideOf(before, judgeBlock(before, DEFAULT_TOLERANCES));
  const bare: number[] = [];
  const verdicts: number[] = [];
  const motions: number[] = [];
  for (let k = 0; k < WARM_UP + RUNS; k += 1) {
    bare.push(timed(() => bareLoop(now.derivative, now.references[0].steps[0].values, ancestor.floor)));
    let judged: JudgedBlock | null = null;
    verdicts.push(
      timed(() => {
        judged = judgeBlock(now, DEFAULT_TOLERANCES);
      }),
    );
    const side = sideOf(now, judged ?? judgeBlock(now, DEFAULT_TOLERANCES));
    motions.push(timed(() => blockMotion(side, ancestor, now.rows, now.columns)));
  }
  for (const times of [bare, verdicts, motions]) times.splice(0, WARM_UP);
  const total = median(verdicts.map((time, k) => time + motions[k]));
  const ratio = total / median(bare);
  console.log("judging 1,000,000 entries, one modelled reference, verdict and motion");
  console.log(
    `  bare loop that allocates its result ${median(bare).toFixed(2)} ms, verdict ${median(verdicts).toFixed(2)} ms, ` +
      `motion ${median(motions).toFixed(2)} ms of processor time (medians of ${RUNS})`,
  );
  console.log(`  ratio ${ratio.toFixed(2)} (goal: at most ${GOAL}) ${ratio <= GOAL ? "holds" : "MISSED"}`);
  const large = makeBlock(2500, 4000, 3);
  const time = timed(() => judgeBlock(large, DEFAULT_TOLERANCES));
  console.log(`  10,000,000 entries judged once in ${time.toFixed(0)} ms of processor time`);
}
