import type { Summation } from "../algebra/algebra.ts";
import { complexNumbers } from "../algebra/complex.ts";
import { dualNumbers, seeded } from "../algebra/dual.ts";
import { plainNumbers } from "../algebra/plain.ts";
import type { BlockModel, Traits } from "../models/types.ts";

/** A model's code at a commit, as one platform runs it. */
export interface Code {
  readonly block: BlockModel;
  readonly traits: Traits;
  readonly summation: Summation;
}

/** Rows = output elements. */
export type Matrix = number[][];

export function outputsOf({ block, traits, summation }: Code, x: readonly number[]): number[] {
  return block.values(plainNumbers(summation), x, traits);
}

/** Forward AD, one pass a column. */
export function jacobianByDuals({ block, traits, summation }: Code, x: readonly number[]): Matrix {
  const algebra = dualNumbers(summation);
  return byColumns(x, (column) => {
    const inputs = x.map((value, at) => (at === column ? seeded(value) : algebra.of(value)));
    return block.values(algebra, inputs, traits).map((output) => output.tangent);
  });
}

/** Im F(x + ih) / h. Source: W. Squire, G. Trapp, SIAM Review 40(1):110-112, 1998, doi:10.1137/S003614459631241X. */
export function jacobianByComplexStep({ block, traits, summation }: Code, x: readonly number[], step: number): Matrix {
  const algebra = complexNumbers(summation);
  return byColumns(x, (column) => {
    const inputs = x.map((value, at) => ({ re: value, im: at === column ? step : 0 }));
    return block.values(algebra, inputs, traits).map((output) => output.im / step);
  });
}

export interface Differences {
  readonly scheme: "central-difference" | "forward-difference";
  /** Relative: times max(|x|, 1). */
  readonly step: number;
  /** Input columns, in the order of the answer's; missing = all. */
  readonly columns?: readonly number[] | undefined;
}

/** Difference quotients. */
export function jacobianByDifferences(code: Code, x: readonly number[], differences: Differences): Matrix {
  const { scheme, step, columns } = differences;
  const rest = scheme === "central-difference" ? null : outputsOf(code, x);
  return byColumns(
    x,
    (column) => {
      const h = step * Math.max(Math.abs(x[column] as number), 1);
      const moved = (by: number) => outputsOf(code, x.with(column, (x[column] as number) + by));
      const low = rest ?? moved(-h);
      return moved(h).map((high, row) => (high - (low[row] as number)) / (rest ? h : 2 * h));
    },
    columns,
  );
}

function byColumns(
  x: readonly number[],
  columnOf: (column: number) => number[],
  which: readonly number[] = [...x.keys()],
): Matrix {
  const columns = which.map(columnOf);
  return (columns[0] ?? []).map((_, row) => columns.map((column) => column[row] as number));
}
