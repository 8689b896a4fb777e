import { DIMENSIONS } from "../../domain/units.ts";
import type { Dimension, Unit } from "../../domain/units.ts";

/** Pairs away from a base unit that are mixed up all the same. */
const FURTHER_PAIRS: readonly (readonly [string, string])[] = [
  ["inches", "feet"],
  ["inches", "millimetres"],
  ["feet", "yards"],
  ["feet", "miles"],
  ["feet", "millimetres"],
  ["degrees", "revolutions"],
  ["degrees per second", "revolutions per minute"],
  ["degrees", "gons"],
  ["degrees", "minutes of arc"],
  ["knots", "miles per hour"],
  ["knots", "kilometres per hour"],
  ["miles per hour", "kilometres per hour"],
  ["pounds", "slugs"],
  ["feet per second squared", "standard gravities"],
  ["kilonewtons", "pounds-force"],
  ["kilopascals", "pounds-force per square inch"],
  ["megapascals", "pounds-force per square inch"],
  ["bars", "pounds-force per square inch"],
  ["bars", "atmospheres"],
  ["kilowatts", "horsepower"],
  ["kilojoules", "IT British thermal units"],
  ["minutes", "hours"],
  ["hours", "days"],
  ["US gallons", "litres"],
  ["cubic feet", "US gallons"],
  ["square inches", "square feet"],
];

/** Dimensions whose ratio is also met squared, in second derivatives; areas have units of their own. */
const SQUARED: ReadonlySet<string> = new Set(["angle"]);

/** Units whose ratios another dimension has as well, where they are the likelier ones. */
const RARE: ReadonlySet<string> = new Set([
  "degrees per second",
  "revolutions per second",
  "feet per second",
  "feet per second squared",
]);

/** The ratio of two units of one dimension, first over second, to a power. */
export interface UnitPair {
  readonly first: Unit;
  readonly second: Unit;
  readonly dimension: string;
  readonly power: 1 | 2;
  readonly ratio: number;
  /** False for pairs that only a posted unit makes likely. */
  readonly usual: boolean;
}

function pairsOf({ name, units }: Dimension): UnitPair[] {
  const pairs: UnitPair[] = [];
  for (const first of units) {
    for (const second of units) {
      if (first === second || first.factor === second.factor) continue;
      const base = (first === units[0] || second === units[0]) && !RARE.has(first.name) && !RARE.has(second.name);
      const further = FURTHER_PAIRS.some(
        ([a, b]) => (a === first.name && b === second.name) || (b === first.name && a === second.name),
      );
      const ratio = first.factor / second.factor;
      pairs.push({ first, second, dimension: name, power: 1, ratio, usual: base || further });
      if (SQUARED.has(name) && base) {
        pairs.push({ first, second, dimension: name, power: 2, ratio: ratio * ratio, usual: true });
      }
    }
  }
  return pairs;
}

/** Every ratio of two units of one dimension, and the usual squares, by size. */
export const UNIT_PAIRS: readonly UnitPair[] = DIMENSIONS.flatMap(pairsOf).sort((a, b) => a.ratio - b.ratio);

/** The pairs whose ratio is `factor` within the relative `tolerance`, the nearest first. */
export function pairsNear(factor: number, tolerance: number): UnitPair[] {
  const off = (pair: UnitPair) => Math.abs(factor / pair.ratio - 1);
  return UNIT_PAIRS.filter((pair) => off(pair) <= tolerance).sort((a, b) => off(a) - off(b));
}
