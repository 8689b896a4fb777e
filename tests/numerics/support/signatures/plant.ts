import type { SignatureCode } from "../../../../shared/domain/vocabulary.ts";
import { integerBetween, shuffled } from "../../../support/random.ts";

/** The right Jacobian of a problem, row-major, and a source of chance. */
export interface Truth {
  readonly rows: number;
  readonly columns: number;
  readonly values: Float64Array;
  readonly random: () => number;
}

/** A mistake put into a right Jacobian. */
export interface Plant {
  readonly kind: string;
  /** The code that it must be named with; null where nothing may be named. */
  readonly code: SignatureCode | null;
  /** What the sentence must say, beside the code. */
  readonly says: RegExp;
  readonly derivative: Float64Array;
}

type Planter = (truth: Truth) => Plant | null;

/** Some of the block: all of it, a row, a column, or one entry. */
function someEntries({ rows, columns, random }: Truth): number[] {
  const all = Array.from({ length: rows * columns }, (_, k) => k);
  const row = integerBetween(random, 0, rows - 1);
  const column = integerBetween(random, 0, columns - 1);
  switch (integerBetween(random, 0, 4)) {
    case 0:
      return all;
    case 1:
      return all.filter((k) => Math.floor(k / columns) === row);
    case 2:
      return all.filter((k) => k % columns === column);
    case 3:
      return shuffled(random, all).slice(0, Math.max(2, Math.floor(all.length / 4)));
    default:
      return [row * columns + column];
  }
}

function someLine({ rows, columns, random }: Truth): number[] {
  const all = Array.from({ length: rows * columns }, (_, k) => k);
  const byRow = columns > 1 && (rows < 2 || random() < 0.5);
  const line = integerBetween(random, 0, (byRow ? rows : columns) - 1);
  return all.filter((k) => (byRow ? Math.floor(k / columns) : k % columns) === line);
}

function changed(truth: Truth, entries: readonly number[], change: (value: number) => number): Float64Array {
  const derivative = truth.values.slice();
  for (const k of entries) derivative[k] = change(truth.values[k] ?? NaN);
  return derivative;
}

const pick = <T>(random: () => number, items: readonly T[]): T => {
  const item = items[integerBetween(random, 0, items.length - 1)];
  if (item === undefined) throw new RangeError("nothing to pick from");
  return item;
};

/** Factors of units as a code would have them, with what the sentence must say of them. */
const UNITS: readonly (readonly [number, RegExp])[] = [
  [Math.PI / 180, /degrees where radians/],
  [180 / Math.PI, /radians where degrees/],
  [0.0254, /inches where metres/],
  [1 / 0.3048, /metres where feet/],
  [12, /feet where inches/],
  [4.4482216152605, /pounds-force where newtons/],
  [6894.757293168361, /pounds-force per square inch where pascals/],
  [1852 / 3600, /knots where metres per second/],
  [Math.PI / 30, /revolutions per minute where radians per second/],
  [2 * Math.PI, /revolutions where radians/],
  [5 / 9, /degrees Fahrenheit where kelvins/],
  [745.6998715822702, /horsepower where watts/],
  [0.45359237, /pounds where kilograms/],
  [3600, /hours where seconds/],
  [1055.05585262, /IT British thermal units where joules/],
  [1 / 4.184, /joules where thermochemical calories/],
  [(Math.PI / 180) ** 2, /degrees where radians are meant, squared/],
];
const FACTORS = [1.37, 0.613, 2.71, 17.3, 1.05, 0.87, -0.4, -1.9, 1.0004] as const;
const PLAIN: readonly (readonly [number, RegExp])[] = [
  [2, /times 2\b/],
  [0.5, /1\/2/],
  [1000, /10³/],
  [1e-3, /10⁻³/],
  [-2, /times -2\b/],
  [1e6, /10⁶/],
];
const ANY = /./;

const signFlipped: Planter = (truth) => ({
  kind: "sign",
  code: "sign-flipped",
  says: /sign flipped/,
  derivative: changed(truth, someEntries(truth), (value) => -value),
});

const unitFactor: Planter = (truth) => {
  const [factor, says] = pick(truth.random, UNITS);
  return {
    kind: "unit",
    code: "unit-factor",
    says,
    derivative: changed(truth, someEntries(truth), (value) => factor * value),
  };
};

const scaled: Planter = (truth) => {
  const factor = pick(truth.random, FACTORS);
  const says = new RegExp(
    `times ${String(factor.toPrecision(3))
      .replace(/\.?0+$/, "")
      .replace(".", "\\.")}`,
  );
  return {
    kind: "factor",
    code: "scaled",
    says,
    derivative: changed(truth, someEntries(truth), (value) => factor * value),
  };
};

const plainFactor: Planter = (truth) => {
  const [factor, says] = pick(truth.random, PLAIN);
  return {
    kind: "plain factor",
    code: "scaled",
    says,
    derivative: changed(truth, someEntries(truth), (value) => factor * value),
  };
};

const transposed: Planter = ({ rows, columns, values }) => {
  if (rows !== columns || rows < 2) return null;
  const derivative = values.map((_, k) => values[(k % columns) * columns + Math.floor(k / columns)] ?? NaN);
  return { kind: "transposed", code: "transposed", says: /transposed/, derivative };
};

const storageOrder: Planter = ({ rows, columns, values, random }) => {
  if (rows === columns || rows < 2 || columns < 2) return null;
  const derivative =
    random() < 0.5
      ? values.map((_, k) => values[(k % rows) * columns + Math.floor(k / rows)] ?? NaN)
      : values.map((_, k) => values[(k % columns) * rows + Math.floor(k / columns)] ?? NaN);
  return { kind: "storage order", code: "storage-order", says: /column by column/, derivative };
};

/** What each line gets: a swap, a reversal, a shift or any other order, with its word. */
function someOrder(random: () => number, count: number): readonly [readonly number[], RegExp] {
  const lines = Array.from({ length: count }, (_, line) => line);
  const [first = 0, second = 0] = shuffled(random, lines);
  switch (integerBetween(random, 0, 3)) {
    case 0:
      return [
        lines.map((line) => (line === first ? second : line === second ? first : line)),
        /swapped|reverse|shifted/,
      ];
    case 1:
      return [lines.slice().reverse(), /reverse|swapped|shifted/];
    case 2:
      return [lines.map((line) => (line + 1) % count), /shifted|swapped|reverse/];
    default:
      return [shuffled(random, lines), ANY];
  }
}

const rowsReordered: Planter = ({ rows, columns, values, random }) => {
  if (rows < 2) return null;
  const [order, says] = someOrder(random, rows);
  const derivative = values.map(
    (_, k) => values[(order[Math.floor(k / columns)] ?? 0) * columns + (k % columns)] ?? NaN,
  );
  return { kind: "rows", code: "rows-reordered", says, derivative };
};

const columnsReordered: Planter = ({ rows, columns, values, random }) => {
  if (columns < 2 || rows < 1) return null;
  const [order, says] = someOrder(random, columns);
  const derivative = values.map((_, k) => values[Math.floor(k / columns) * columns + (order[k % columns] ?? 0)] ?? NaN);
  return { kind: "columns", code: "columns-reordered", says, derivative };
};

const termZero: Planter = (truth) => ({
  kind: "term dropped",
  code: "term-missing",
  says: /exactly 0/,
  derivative: changed(truth, someEntries(truth), () => 0),
});

/** One product of the chain rule, of the size of the block, left out. */
const productMissing: Planter = ({ rows, columns, values, random }) => {
  if (rows < 2 || columns < 2) return null;
  const largest = values.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  const number = () => (random() < 0.5 ? -1 : 1) * (0.2 + random());
  const column = Array.from({ length: rows }, number);
  const row = Array.from({ length: columns }, number);
  const derivative = values.map(
    (value, k) => value - largest * (column[Math.floor(k / columns)] ?? 0) * (row[k % columns] ?? 0),
  );
  return { kind: "product dropped", code: "term-missing", says: /rank 1/, derivative };
};

const spuriousTerm: Planter = (truth) => {
  const { values, random } = truth;
  const zeros = Array.from(values.keys()).filter((k) => values[k] === 0);
  if (zeros.length === 0) return null;
  const largest = values.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  const some = shuffled(random, zeros).slice(0, integerBetween(random, 1, Math.min(5, zeros.length)));
  const derivative = changed(truth, some, () => largest * (0.05 + random()) * (random() < 0.5 ? -1 : 1));
  return { kind: "spurious term", code: "spurious-term", says: /not 0 where/, derivative };
};

/** Calculated in 32-bit numbers: rounding has piled up to some ten units of their last place. */
const singlePrecision: Planter = (truth) => {
  const { random } = truth;
  const off = () => 1 + (random() < 0.5 ? -1 : 1) * (5e-6 + 4e-5 * random());
  return {
    kind: "single precision",
    code: "single-precision",
    says: /single precision/,
    derivative: changed(truth, someEntries(truth), (value) => Math.fround(value * off())),
  };
};

const unevenSolve: Planter = (truth) => {
  const { values, random } = truth;
  const line = someLine(truth);
  const sizes = line.map((k) => Math.abs(values[k] ?? NaN)).sort((a, b) => a - b);
  const largest = sizes[sizes.length - 1] ?? 0;
  // Of one absolute size only where the entries are not.
  const unlike = sizes.filter((size) => size > 0 && size < largest / 30).length;
  if (line.length < 6 || unlike < 2 || largest === 0) return null;
  const size = largest * 10 ** (-2.5 - 2 * random());
  let sign = 1;
  const derivative = changed(truth, line, (value) => value + (sign *= -1) * size * (0.5 + random()));
  return { kind: "uneven solve", code: "uneven-solve", says: /inner solve/, derivative };
};

const notFinite: Planter = (truth) => {
  const value = pick(truth.random, [NaN, Infinity, -Infinity]);
  return {
    kind: "not finite",
    code: "not-finite",
    says: Number.isNaN(value) ? /NaN/ : /infinite/,
    derivative: changed(truth, someEntries(truth), () => value),
  };
};

/** Wrong in a way that no pattern tells: nothing may be named. */
const nothingKnown: Planter = (truth) => {
  const { random } = truth;
  const known = someEntries(truth).filter((k) => truth.values[k] !== 0);
  return {
    kind: "no pattern",
    code: null,
    says: ANY,
    derivative: changed(truth, known, (value) => value * (1 + (random() < 0.5 ? -0.3 : 0.4) * (0.1 + random()))),
  };
};

/** Every kind of mistake, one planter each. */
export const PLANTERS: readonly Planter[] = [
  signFlipped,
  unitFactor,
  scaled,
  plainFactor,
  transposed,
  storageOrder,
  rowsReordered,
  columnsReordered,
  termZero,
  productMissing,
  spuriousTerm,
  singlePrecision,
  unevenSolve,
  notFinite,
  nothingKnown,
];
