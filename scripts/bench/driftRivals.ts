import { ewma } from "../../shared/numerics/charts/ewma.ts";
import { tabularCusum } from "../../shared/numerics/charts/tabularCusum.ts";

/** Builds that a rival takes its centre and deviation from; it cannot tell anything before. */
const LEARNED = 20;

/** Index of the first signal of a series with this centre and standard deviation, -1 if none. */
export type Rival = (x: Float64Array, centre: number, deviation: number) => number;

/** Charts of the handbooks, as they stand there: what drift is compared with. */
export const RIVALS: Record<string, Rival> = {
  EWMA: (x, centre, deviation) => ewma(x, { start: centre, lambda: 0.2, sigma: deviation, factor: 3 }).signal,
  CUSUM: (x, centre, deviation) => tabularCusum(x, { target: centre, k: 0.5 * deviation, h: 8 * deviation }).signal,
};

export interface ChartTally {
  /** Builds from the start of the climb to the signal; Infinity where there is none, or one before the start. */
  readonly delays: number[];
  readonly signals: number;
  /** Entry-builds that were watched, up to the first signal of each entry. */
  readonly watched: number;
}

/** Follows every entry's lane with a rival chart until it signals. */
export function followChart(rival: Rival, lanes: readonly Float64Array[], start: number): ChartTally {
  const delays: number[] = [];
  let signals = 0;
  let watched = 0;
  for (let k = 0; k < lanes[0].length; k += 1) {
    const learned = Float64Array.from(lanes.slice(0, LEARNED), (g) => g[k]);
    const series = Float64Array.from(lanes.slice(LEARNED), (g) => g[k]);
    const centre = learned.reduce((sum, g) => sum + g, 0) / LEARNED;
    const squares = learned.reduce((sum, g) => sum + (g - centre) ** 2, 0);
    const signal = rival(series, centre, Math.sqrt(squares / (LEARNED - 1)));
    const told = LEARNED + signal + 1 - start;
    delays.push(signal >= 0 && told > 0 ? told : Infinity);
    if (signal >= 0) signals += 1;
    watched += signal < 0 ? series.length : signal + 1;
  }
  return { delays, signals, watched };
}
