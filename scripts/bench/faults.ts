import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { nameSignatures } from "../../shared/numerics/signatures/nameSignatures.ts";
import type { BlockNumbers } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { cleanTrials, faultTrials, NAMES } from "../../tests/numerics/support/signatures/faultTrials.ts";
import type { FaultTrial } from "../../tests/numerics/support/signatures/faultTrials.ts";
import { mulberry32 } from "../../tests/support/random.ts";

const SEED = 20_261_201;
const LEAST_RIGHT = 0.97;
const MOST_WRONG = 0.01;
/** Naming a block of 1,000,000 wrong entries against judging it. */
const MOST_JUDGE_TIMES = 20;
const RUNS = 5;
/** Mistakes named wrongly that are shown one by one. */
const SHOWN = 20;

type Tally = Record<FaultTrial["outcome"], number>;

/** Plants mistakes in the published problems and counts how many are named for what they are. */
export function run(): Promise<void> {
  const clean = cleanTrials();
  const cleanNamed = clean.filter(({ named }) => named.length > 0);
  const trials = faultTrials(SEED, 1);
  const kinds = tallied(trials, ({ plant }) => plant.kind);
  console.log(
    `${trials.length} mistakes of ${kinds.size} kinds in ${clean.length} published Jacobians and references, ` +
      `${trials.filter(({ sparse }) => sparse).length} of them in sparse blocks`,
  );
  printTallies("kind", kinds);
  printTallies(
    "reference",
    tallied(trials, ({ name }) => name.slice(name.lastIndexOf(", ") + 2)),
  );
  const total = tally(trials);
  const share = (count: number) => count / trials.length;
  goal("named right", share(total.right), share(total.right) >= LEAST_RIGHT, `at least ${LEAST_RIGHT * 100} %`);
  goal("named wrong", share(total.wrong), share(total.wrong) <= MOST_WRONG, `at most ${MOST_WRONG * 100} %`);
  goal("clean blocks named", cleanNamed.length / clean.length, cleanNamed.length === 0, "none");
  for (const trial of trials.filter(({ outcome }) => outcome === "wrong").slice(0, SHOWN)) printWrong(trial);
  printCost();
  return Promise.resolve();
}

function tally(trials: readonly FaultTrial[]): Tally {
  const counts: Tally = { right: 0, wrong: 0, unnamed: 0 };
  for (const { outcome } of trials) counts[outcome] += 1;
  return counts;
}

function tallied(trials: readonly FaultTrial[], keyOf: (trial: FaultTrial) => string): Map<string, Tally> {
  const keys = [...new Set(trials.map(keyOf))];
  return new Map(keys.map((key) => [key, tally(trials.filter((trial) => keyOf(trial) === key))]));
}

function printTallies(title: string, tallies: ReadonlyMap<string, Tally>): void {
  console.log(`  ${title.padEnd(18)} right  wrong  unnamed`);
  for (const [key, { right, wrong, unnamed }] of tallies) {
    const cells = [right, wrong, unnamed].map((count) => String(count).padStart(6));
    console.log(`  ${key.padEnd(17)} ${cells.join(" ")}`);
  }
}

function goal(what: string, share: number, holds: boolean, limit: string): void {
  console.log(`  ${what} ${(100 * share).toFixed(2)} % (goal: ${limit}) ${holds ? "holds" : "MISSED"}`);
}

function printWrong({ name, plant, scope, named }: FaultTrial): void {
  const told = named.map((one) => `${one.code}: ${one.detail}`).join(" / ");
  console.log(`  wrong: ${plant.kind} (${plant.code ?? "nothing to name"}, ${scope}) in ${name}: ${told}`);
}

/** What the block of the cost measurement looks like. */
const COSTS: readonly (readonly [string, (r: number, column: number, random: () => number) => number])[] = [
  ["all signs flipped", (r) => -r],
  ["each column by its own mistake", (r, column) => r * ([-1, 2, Math.PI / 180, 1.3][column % 4] ?? 1)],
  ["no pattern", (r, _column, random) => r * (1 + 0.3 * random())],
];

function printCost(): void {
  console.log("naming 1,000,000 wrong entries, in times of judging them");
  for (const [what, change] of COSTS) {
    const block = largeBlock(change);
    const judging: number[] = [];
    const naming: number[] = [];
    for (let k = 0; k < RUNS; k += 1) {
      let judged = judgeBlock(block, DEFAULT_TOLERANCES);
      judging.push(timed(() => (judged = judgeBlock(block, DEFAULT_TOLERANCES))));
      naming.push(timed(() => nameSignatures(block, judged, NAMES)));
    }
    const ratio = Math.min(...naming) / Math.min(...judging);
    const holds = ratio <= MOST_JUDGE_TIMES ? "holds" : "MISSED";
    console.log(`  ${what}: ${ratio.toFixed(1)} (goal: at most ${MOST_JUDGE_TIMES}) ${holds}`);
  }
}

function largeBlock(change: (r: number, column: number, random: () => number) => number): BlockNumbers {
  const random = mulberry32(7);
  const size = 1000;
  const values = Float64Array.from({ length: size * size }, () => (random() - 0.5) * 10 ** (2 * random()));
  return {
    rows: size,
    columns: size,
    outputValues: null,
    inputValues: null,
    derivative: values.map((r, k) => change(r, k % size, random)),
    references: [
      {
        method: "complex-step",
        stepKind: "absolute",
        precision: null,
        columns: null,
        steps: [{ step: 1e-20, values }],
        uncertainty: null,
        notFinite: 0,
      },
    ],
  };
}

/** Milliseconds of processor time. */
function timed(work: () => void): number {
  const start = process.cpuUsage();
  work();
  const { user, system } = process.cpuUsage(start);
  return (user + system) / 1000;
}
