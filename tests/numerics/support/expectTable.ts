import { expect } from "vitest";

/** One value to be compared with a published one. */
export interface TableRow {
  readonly label: string;
  readonly actual: number;
  readonly expected: number;
  /** Largest |actual - expected| that is accepted. */
  readonly tolerance: number;
}

/**
 * Compares a table of values with published ones. Prints the largest and the RMS error in units of the tolerance,
 * and fails with every row that is out of it. An empty table fails: it compared nothing.
 */
export function expectTable(name: string, rows: readonly TableRow[]): void {
  expect(rows.length, `${name}: rows compared`).toBeGreaterThan(0);
  const errors = rows.map(({ actual, expected }) => (actual === expected ? 0 : Math.abs(actual - expected)));
  const shares = rows.map(({ tolerance }, k) => (errors[k] === 0 ? 0 : (errors[k] ?? NaN) / tolerance));
  const largest = shares.reduce((most, share) => (share <= most ? most : share), 0);
  const rms = Math.sqrt(shares.reduce((sum, share) => sum + share * share, 0) / rows.length);
  const failing = rows.flatMap((row, k) => ((shares[k] ?? NaN) <= 1 ? [] : [line(row, errors[k] ?? NaN)]));
  const summary = `${name}: ${rows.length} rows, largest error ${largest.toPrecision(3)}, RMS ${rms.toPrecision(3)} tolerances`;
  console.info(summary);
  if (failing.length > 0) expect.fail([summary, ...failing].join("\n  "));
}

function line({ label, actual, expected, tolerance }: TableRow, error: number): string {
  return `${label}: ${actual}, expected ${expected}, error ${error.toExponential(2)} > ${tolerance.toExponential(2)}`;
}
