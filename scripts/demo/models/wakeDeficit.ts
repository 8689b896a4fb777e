import { sum } from "../algebra/algebra.ts";
import type { Algebra } from "../algebra/algebra.ts";
import type { Code } from "../code.ts";
import type { DemoModel } from "./model.ts";

const RADIUS = 8.75;
/** Grid coordinates of the site's corner, m: large beside the distances between turbines. */
const EAST = 482_310.37;
const NORTH = 6_541_207.81;
/** A calm that no wake reaches still has this deficit, so that its root is smooth. */
const CALM = 1e-3;

interface Place {
  readonly east: number;
  readonly north: number;
}

/** Forty turbines in eight staggered rows of five. */
const TURBINES: readonly Place[] = Array.from({ length: 40 }, (_, j) => {
  const [row, at] = [Math.floor(j / 5), j % 5];
  return { east: EAST + 84.3 * row, north: NORTH + 46.7 * at + (row % 2) * 23.35 + 3.1 * Math.sin(5 * j) };
});
/** Six transects of ten points, each downstream of some turbines. */
const POINTS: readonly Place[] = Array.from({ length: 60 }, (_, i) => {
  const [transect, at] = [Math.floor(i / 10), i % 10];
  return { east: EAST + 131.9 * (transect + 1), north: NORTH - 12.6 + 25.4 * at + 2.3 * transect };
});

/** Metres that a point lies downstream and across of a turbine. */
const offsets = (point: Place, turbine: Place) => ({
  downstream: point.east - turbine.east,
  across: point.north - turbine.north,
});

const single = ({ east, north }: Place): Place => ({ east: Math.fround(east), north: Math.fround(north) });

/** Deficit that one turbine of induction a leaves at a point: a Gaussian that grows faster behind a loaded rotor. */
function ofOne<T>(algebra: Algebra<T>, induction: T, point: Place, turbine: Place, code: Code): T | null {
  const { downstream, across } = offsets(point, turbine);
  if (downstream <= 0) return null;
  const { add, mul, div, scale, exp, of } = algebra;
  const growth = add(of(code.wakeGrowth), scale(induction, 0.045));
  const width = add(of(0.62 * RADIUS), scale(growth, downstream));
  const spread = div(of(RADIUS), width);
  const bell = exp(scale(mul(spread, spread), (-0.5 * across ** 2) / RADIUS ** 2));
  return mul(mul(scale(induction, 2), mul(spread, spread)), bell);
}

/** Velocity deficit at sixty points of the site against the induction of forty turbines, dimensionless. */
export const wakeDeficit: DemoModel = {
  model: "wake.deficit",
  output: {
    name: "deficit",
    elements: POINTS.map((_, i) => `transect ${Math.floor(i / 10) + 1}, point ${(i % 10) + 1}`),
  },
  input: {
    name: "induction",
    elements: TURBINES.map((_, j) => `turbine ${String.fromCharCode(65 + Math.floor(j / 5))}${(j % 5) + 1}`),
    values: TURBINES.map((_, j) => 0.24 + 0.06 * Math.sin(1.7 * j)),
  },
  sources: ["src/wake/deficit.f90", "src/wake/deficit_derivative.f90"],

  evaluate<T>(algebra: Algebra<T>, inductions: readonly T[], code: Code): T[] {
    return POINTS.map((point) => {
      const squares = inductions.flatMap((induction, j) => {
        const deficit = ofOne(algebra, induction, point, TURBINES[j]!, code);
        return deficit === null ? [] : [algebra.mul(deficit, deficit)];
      });
      return algebra.sqrt(algebra.add(algebra.of(CALM ** 2), sum(algebra, squares)));
    });
  },

  derivative(inductions, code) {
    const stored = code.coordinatesInDouble ? (place: Place) => place : single;
    const rows = POINTS.map((point) => {
      const parts = inductions.map((induction, j) => slopeOfOne(induction, stored(point), stored(TURBINES[j]!), code));
      const total = Math.sqrt(CALM ** 2 + parts.reduce((squares, { deficit }) => squares + deficit ** 2, 0));
      return parts.map(({ deficit, slope }) => (deficit * slope) / total);
    });
    return code.transects.flatMap((transect) => rows.slice(10 * transect, 10 * transect + 10));
  },
};

function slopeOfOne(induction: number, point: Place, turbine: Place, code: Code): { deficit: number; slope: number } {
  const { downstream, across } = offsets(point, turbine);
  if (downstream <= 0) return { deficit: 0, slope: 0 };
  const width = 0.62 * RADIUS + (code.wakeGrowth + 0.045 * induction) * downstream;
  const spread = RADIUS / width;
  const steepness = (0.5 * across ** 2) / RADIUS ** 2;
  const deficit = 2 * induction * spread ** 2 * Math.exp(-steepness * spread ** 2);
  const spreadSlope = (-spread * 0.045 * downstream) / width;
  return { deficit, slope: deficit * (1 / induction + (2 / spread - 2 * steepness * spread) * spreadSlope) };
}
