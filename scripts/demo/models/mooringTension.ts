import { sum } from "../algebra/algebra.ts";
import type { Algebra } from "../algebra/algebra.ts";
import { real } from "../algebra/real.ts";
import type { Code } from "../code.ts";
import type { DemoModel } from "./model.ts";

const LINES = 12;
/** Sweeps in which the model itself solves for the tensions: far more than binary64 can tell. */
const MODEL_SWEEPS = 60;
/** Part of a neighbour's pull that the yielding fairlead takes from a line, and of the next one's. */
const RELIEF = [0.16, 0.05];

const bearing = (line: number): number => (2 * Math.PI * (line + 0.25)) / LINES;
const relief = (i: number, j: number): number => {
  const apart = Math.min((i - j + LINES) % LINES, (j - i + LINES) % LINES);
  return apart === 0 ? 0 : (RELIEF[apart - 1] ?? 0);
};
/** Metres of stretch of a line for each metre or degree of the platform. */
const reach = (line: number): number[] => {
  const angle = bearing(line);
  const [c, s] = [Math.cos(angle), Math.sin(angle)];
  return [c, s, 0.42, 0.11 * s, -0.11 * c, 0.05 * Math.sin(2 * angle)];
};

/** Pull of each line on a stiff platform, kN: pretension, and a stretch that stiffens. */
function stiffPull<T>(algebra: Algebra<T>, x: readonly T[]): T[] {
  const { add, mul, scale, of } = algebra;
  const [pretension, stiffness] = [x[6]!, x[7]!];
  return Array.from({ length: LINES }, (_, line) => {
    const moved = sum(
      algebra,
      reach(line).map((factor, j) => scale(x[j]!, factor)),
    );
    const stretch = add(of(6), moved);
    return add(pretension, mul(stiffness, algebra.power(stretch, 1.4)));
  });
}

/**
 * Solves t = b - R t by sweeps, R the relief of the fairleads. Each sweep divides the error by about 2.4.
 */
function relieve<T>(algebra: Algebra<T>, pull: readonly T[], sweeps: number): T[] {
  let tension = [...pull];
  for (let sweep = 0; sweep < sweeps; sweep += 1) {
    tension = pull.map((b, i) =>
      tension.reduce((t, other, j) => {
        const part = relief(i, j);
        return part === 0 ? t : algebra.sub(t, algebra.scale(other, part));
      }, b),
    );
  }
  return tension;
}

/** Tension of twelve mooring lines, kN, against the platform's motion and the lines' setting. */
export const mooringTension: DemoModel = {
  model: "mooring.tension",
  output: { name: "tension", unit: "kN", elements: Array.from({ length: LINES }, (_, line) => `line ${line + 1}`) },
  input: {
    name: "platform",
    elements: [
      "surge, m",
      "sway, m",
      "heave, m",
      "roll, deg",
      "pitch, deg",
      "yaw, deg",
      "pretension, kN",
      "stiffness, kN/m^1.4",
    ],
    values: [1.8, -0.7, 0.4, 1.2, -2.1, 3.4, 240, 31],
  },
  sources: ["src/mooring/tension.f90", "src/mooring/relief_solve.f90"],

  evaluate<T>(algebra: Algebra<T>, x: readonly T[], _: Code): T[] {
    return relieve(algebra, stiffPull(algebra, x), MODEL_SWEEPS);
  },

  derivative(x, code) {
    const columns = x.map((_, j) => relieve(real, pullSlopes(x, j), code.mooringSweeps));
    return Array.from({ length: LINES }, (_, line) => columns.map((column) => column[line]!));
  },
};

/** Slope of every stiff pull against input j. */
function pullSlopes(x: readonly number[], j: number): number[] {
  return Array.from({ length: LINES }, (_, line) => {
    const factors = reach(line);
    const stretch = 6 + factors.reduce((total, factor, at) => total + factor * x[at]!, 0);
    if (j === 6) return 1;
    if (j === 7) return stretch ** 1.4;
    return 1.4 * x[7]! * stretch ** 0.4 * factors[j]!;
  });
}
