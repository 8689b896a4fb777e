import { unitOf } from "../../domain/units.ts";
import { plainRatio } from "./plainRatio.ts";
import type { BlockNames, SideNames } from "./types.ts";
import { pairsNear } from "./unitPairs.ts";
import type { UnitPair } from "./unitPairs.ts";

const EXACT = 1e-9;

/** What a factor may come from, the likeliest first: by the posted units, else the usual mix-ups. */
export interface UnitReading {
  /** True where a posted unit makes it likely. */
  readonly posted: boolean;
  readonly ratio: number;
  /** `degrees where radians are meant`. */
  readonly words: string;
}

/** Every mix-up of units whose ratio is `factor` within the relative `tolerance`; plain ratios only where posted. */
export function unitReadings(factor: number, tolerance: number, names: BlockNames): UnitReading[] {
  const pairs = pairsNear(factor, tolerance);
  const posted = pairs.flatMap((pair) => postedReading(pair, names));
  const usual = pairs.filter((pair) => pair.usual && plainRatio(pair.ratio, EXACT) === null);
  return distinct([...posted, ...usual.map((pair) => usualReading(pair))]);
}

/** Mix-ups of units that a plain ratio such as 1000 may come from, posted or not. */
export function plainReadings(factor: number, tolerance: number): UnitReading[] {
  return distinct(
    pairsNear(factor, tolerance)
      .filter((pair) => pair.usual)
      .map(usualReading),
  );
}

function usualReading({ ratio, first, second, power }: UnitPair): UnitReading {
  const squared = power === 2 ? ", squared" : "";
  return { posted: false, ratio, words: `${first.name} where ${second.name} are meant${squared}` };
}

/**
 * By an input posted in P, d/dx per unit X is size(X)/size(P) times the reference; an output posted in Q, taken in X,
 * leaves size(Q)/size(X).
 */
function postedReading(pair: UnitPair, { output, input }: BlockNames): UnitReading[] {
  const { first, second, ratio, power } = pair;
  if (power === 2) return [];
  const readings: UnitReading[] = [];
  const isPosted = (side: SideNames, unit: UnitPair["first"]) => unitOf(side.unit)?.unit === unit;
  const say = ({ name, unit }: SideNames, taken: UnitPair["first"]) =>
    `${taken.name} where ${name} is posted in ${unit ?? ""}`;
  if (isPosted(input, second)) readings.push({ posted: true, ratio, words: say(input, first) });
  if (isPosted(output, first)) readings.push({ posted: true, ratio, words: say(output, second) });
  return readings;
}

function distinct(readings: readonly UnitReading[]): UnitReading[] {
  return readings.filter(({ words }, k) => readings.findIndex((other) => other.words === words) === k);
}

const PARTS_OF_PI: readonly number[] = [180, 200, 30, 10_800, 648_000];

/** `π/180` and the like where the ratio is one, else null. */
export function piText(ratio: number): string | null {
  const near = (value: number) => Math.abs(ratio / value - 1) <= EXACT;
  if (near(2 * Math.PI)) return "2π";
  if (near(1 / (2 * Math.PI))) return "1/2π";
  for (const n of PARTS_OF_PI) {
    if (near(Math.PI / n)) return `π/${n}`;
    if (near(n / Math.PI)) return `${n}/π`;
    if (near((Math.PI / n) ** 2)) return `(π/${n})^2`;
    if (near((n / Math.PI) ** 2)) return `(${n}/π)^2`;
  }
  return null;
}
