import type { Algebra } from "../algebra/algebra.ts";
import type { Code } from "../code.ts";
import { RADIANS_PER_DEGREE, SEA_WATER_DENSITY } from "./model.ts";
import type { DemoModel } from "./model.ts";

const STATIONS = [1.6, 2.9, 4.2, 5.5, 6.8, 8.1];
const ROTOR_SPEED = 1.25;
/** Angle of attack at which the lift begins to fall behind, rad. */
const STALL_ANGLE = 0.24;
/** Part of a neighbour's twist that the skin passes on. */
const COUPLING = 0.07;

const chord = (radius: number): number => 1.35 - 0.095 * radius;
const squaredSpeed = (radius: number, flow: number): number => (0.7 * flow) ** 2 + (ROTOR_SPEED * radius) ** 2;
const inflowAngle = (radius: number, flow: number): number => Math.atan2(0.7 * flow, ROTOR_SPEED * radius);

/** Share of element j's twist in the angle of element i. */
function share(i: number, j: number): number {
  return i === j ? 1 : Math.abs(i - j) === 1 ? COUPLING : 0;
}

function anglesOfAttack<T>(algebra: Algebra<T>, twist: readonly T[], flow: number): T[] {
  return STATIONS.map((radius, i) =>
    twist.reduce(
      (angle, degrees, j) => algebra.sub(angle, algebra.scale(degrees, RADIANS_PER_DEGREE * share(i, j))),
      algebra.of(inflowAngle(radius, flow)),
    ),
  );
}

/** Lift a metre of span, N/m, at six stations against the twist there, in degrees. */
export const bladeSection: DemoModel = {
  model: "blade.section",
  output: { name: "lift", unit: "N/m", elements: STATIONS.map((radius) => `r = ${radius} m`) },
  input: {
    name: "twist",
    unit: "deg",
    elements: STATIONS.map((radius) => `r = ${radius} m`),
    values: [21.5, 12.8, 7.9, 5.1, 3.2, 2.1],
  },
  sources: ["src/blade/section.f90", "src/blade/section_derivative.f90"],

  evaluate<T>(algebra: Algebra<T>, twist: readonly T[], code: Code): T[] {
    return anglesOfAttack(algebra, twist, code.flowSpeed).map((angle, i) => {
      const radius = STATIONS[i]!;
      const pressure = 0.5 * SEA_WATER_DENSITY * squaredSpeed(radius, code.flowSpeed) * chord(radius);
      const stall = algebra.add(
        algebra.of(1),
        algebra.power(algebra.scale(angle, 1 / STALL_ANGLE), code.stallExponent),
      );
      return algebra.scale(algebra.div(algebra.sin(angle), algebra.sqrt(stall)), 2 * Math.PI * pressure);
    });
  },

  derivative(twist, code) {
    const angles = STATIONS.map((radius, i) =>
      twist.reduce(
        (angle, degrees, j) => angle - degrees * RADIANS_PER_DEGREE * share(i, j),
        inflowAngle(radius, code.flowSpeed),
      ),
    );
    const perTwist = code.liftInRadians ? RADIANS_PER_DEGREE : 1;
    return angles.map((angle, i) => {
      const radius = STATIONS[i]!;
      const pressure = 0.5 * SEA_WATER_DENSITY * squaredSpeed(radius, code.flowSpeed) * chord(radius);
      const p = code.stallExponent;
      const stall = 1 + (angle / STALL_ANGLE) ** p;
      const stallSlope = (p * (angle / STALL_ANGLE) ** (p - 1)) / STALL_ANGLE;
      const slope = Math.cos(angle) / Math.sqrt(stall) - (0.5 * Math.sin(angle) * stallSlope) / stall ** 1.5;
      return twist.map((_, j) => (share(i, j) === 0 ? 0 : -2 * Math.PI * pressure * slope * perTwist * share(i, j)));
    });
  },
};
