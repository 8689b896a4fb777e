import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { cusumAverageRunLength } from "../../shared/numerics/charts/cusumAverageRunLength.ts";
import { advanceDrift } from "../../shared/numerics/drift/advanceDrift.ts";
import { newDriftState } from "../../shared/numerics/drift/newDriftState.ts";
import type { DriftValues } from "../../shared/numerics/drift/types.ts";
import { median } from "../../shared/numerics/robust/median.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { followDrift, lanesOf } from "../../tests/numerics/support/driftTrials.ts";
import { normals } from "../../tests/numerics/support/normals.ts";
import type { ChartTally, Rival } from "./driftRivals.ts";
import { followChart, RIVALS } from "./driftRivals.ts";
import { makeBlock, timed } from "./judge.ts";

const ENTRIES = 1_000_000;
const SHARE_GOAL = 0.2;
const DELAY_GOAL = 12;
const FALSE_GOAL = 1;
const NOISES = [0.05, 0.1, 0.2, 0.3];
const LENGTHS = [20, 60, 300, 1000];
const STARTS = [0, 5, 10, 20, 100];
const ENTRY_BUILDS = 400_000;

/** Prints what following drift costs beside judging, how soon climbs are told, and how often in vain. */
export async function run(): Promise<void> {
  cost();
  delays();
  falseEvents();
}

function cost(): void {
  const block = makeBlock(1000, 1000, 1);
  const judging = medianTime(60, () => judgeBlock(block, DEFAULT_TOLERANCES));
  const builds = noisyBuilds();
  const state = newDriftState(ENTRIES);
  let id = 0;
  const next = (values: DriftValues | null): void => {
    id += 1;
    advanceDrift(state, id, values);
  };
  const young = medianTime(20, () => next(builds[id % builds.length]), 0);
  const changed = medianTime(30, () => next(builds[id % builds.length]));
  const repeated = medianTime(5, () => next(null), 0);
  for (let rest = 0; rest < 100; rest += 1) next(null);
  const later = medianTime(60, () => next(null));
  for (let rest = 0; rest < 400; rest += 1) next(null);
  const unchanged = medianTime(60, () => next(null));
  const share = (time: number): string => `${((100 * time) / judging).toFixed(0)} %`;
  console.log("drift of 1,000,000 entries, as a share of judging them (one modelled reference)");
  console.log(`  every entry changed: young baselines ${share(young)}, whole ones ${share(changed)}`);
  console.log(`  unchanged, the builds just after that ${share(repeated)}, 100 builds later ${share(later)}`);
  const holds = unchanged / judging <= SHARE_GOAL ? "holds" : "MISSED";
  console.log(`  unchanged, 500 builds later ${share(unchanged)} (goal: at most ${100 * SHARE_GOAL} %) ${holds}`);
}

/** Builds of noise about 1e-9 that the reference sees. */
function noisyBuilds(): DriftValues[] {
  const normal = normals(3);
  return Array.from({ length: 7 }, () => ({
    derivative: Float64Array.from({ length: ENTRIES }, () => 1 + 10 ** (-9 + 0.1 * normal())),
    reference: new Float64Array(ENTRIES).fill(1),
    resolution: new Float32Array(ENTRIES).fill(1e-14),
    verdict: new Uint8Array(ENTRIES),
    floor: 1e-3,
  }));
}

/** Median processor time of so many runs; those of the warm-up do not count. */
function medianTime(runs: number, work: () => void, warmUp = runs / 2): number {
  return median(Array.from({ length: runs }, () => timed(work)).slice(warmUp));
}

function delays(): void {
  console.log("builds until a climb of 0.1 decade a build is told, median / 90 %, by noise and by builds before it");
  const table = NOISES.flatMap((noise) => STARTS.map((start) => delaysOf(noise, start)));
  for (const { label, cells } of table) console.log(`  ${label}: ${cells.join(", ")}`);
  const goal = table.filter(({ noise, start }) => noise <= 0.1 && start >= 5);
  const worst = Math.max(...goal.map(({ middle }) => middle));
  const holds = worst <= DELAY_GOAL ? "holds" : "MISSED";
  console.log(
    `  largest median at noise up to 0.1 from the fifth build on: ${worst} (goal: at most ${DELAY_GOAL}) ${holds}`,
  );
}

interface DelayRow {
  readonly noise: number;
  readonly start: number;
  readonly middle: number;
  readonly label: string;
  readonly cells: readonly string[];
}

function delaysOf(noise: number, start: number): DelayRow {
  const lanes = lanesOf({ entries: 500, builds: start + 60, noise, slope: 0.1, start, seed: 7 });
  const own = followDrift(lanes, start).delays;
  const cells = rivalsOf(lanes, start).map(({ name, tally }) => `${name} ${spread(tally.delays)}`);
  return {
    noise,
    start,
    middle: median(own),
    label: `noise ${noise}, after ${start}`,
    cells: [`drift ${spread(own)}`, ...cells],
  };
}

function spread(values: readonly number[]): string {
  const sorted = Float64Array.from(values).sort();
  return `${median(sorted)} / ${sorted[Math.floor(0.9 * sorted.length)]}`;
}

function rivalsOf(lanes: readonly Float64Array[], start: number): { name: string; tally: ChartTally }[] {
  return Object.entries(RIVALS).map(([name, rival]: [string, Rival]) => ({
    name,
    tally: followChart(rival, lanes, start),
  }));
}

function falseEvents(): void {
  console.log("false climbs / jumps per 10,000 entry-builds of constant level; rivals: signals until the first");
  const rates = NOISES.flatMap((noise) => LENGTHS.map((builds) => falseOf(noise, builds)));
  const worst = Math.max(...rates);
  const holds = worst < FALSE_GOAL ? "holds" : "MISSED";
  console.log(`  most false climbs ${worst.toFixed(3)} (goal: fewer than ${FALSE_GOAL}) ${holds}`);
  const ideal = cusumAverageRunLength({ k: 0.5, h: 8, shift: 0, states: 200 });
  console.log(`  the sum alone, with centre and spread known, would tell ${(10_000 / ideal).toFixed(3)}`);
}

function falseOf(noise: number, builds: number): number {
  const entries = ENTRY_BUILDS / builds;
  const lanes = lanesOf({ entries, builds, noise, slope: 0, start: 0, seed: 11 });
  const { climbs, jumps } = followDrift(lanes, 0);
  const rate = (events: number, watched: number): number => (10_000 * events) / watched;
  const cells = rivalsOf(lanes, 0).map(({ name, tally }) => `${name} ${rate(tally.signals, tally.watched).toFixed(1)}`);
  const own = rate(climbs, ENTRY_BUILDS);
  const told = `${own.toFixed(3)} / ${rate(jumps, ENTRY_BUILDS).toFixed(3)}`;
  console.log(`  noise ${noise}, ${builds} builds: drift ${told}${builds > 20 ? `, ${cells.join(", ")}` : ""}`);
  return own;
}
