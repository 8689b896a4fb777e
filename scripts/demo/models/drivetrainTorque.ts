import type { Algebra } from "../algebra/algebra.ts";
import type { Code } from "../code.ts";
import type { DemoModel } from "./model.ts";

/** Friction of the main bearing, kN m, at 1 rad/s and 40 degrees. */
const BEARING = 3.4;
/** Loss of viscosity a degree. */
const THINNING = 0.021;
/** Windage of the generator, kN m, at 1 rad/s of its shaft. */
const WINDAGE = 0.0042;
const WINDAGE_EXPONENT = 1.3;

/** Torque on three shafts, kN m, against power, speed and state of the gear. */
export const drivetrainTorque: DemoModel = {
  model: "drivetrain.torque",
  output: { name: "torque", unit: "kN m", elements: ["main shaft", "generator shaft", "brake"] },
  input: {
    name: "shaft",
    elements: ["rotor power, kW", "rotor speed, rad/s", "gear ratio", "gear efficiency", "oil temperature, degC"],
    values: [820, 1.25, 38.5, 0.962, 52],
  },
  sources: ["src/drivetrain/torque.f90", "src/drivetrain/torque_derivative.f90"],

  evaluate<T>(algebra: Algebra<T>, [power, speed, ratio, efficiency, oil]: readonly T[], _: Code): T[] {
    const { add, sub, mul, div, scale, exp, of } = algebra;
    const thin = exp(scale(sub(oil!, of(40)), -THINNING));
    const friction = scale(mul(algebra.power(speed!, 1.5), thin), BEARING);
    const main = sub(div(power!, speed!), friction);
    const windage = scale(algebra.power(mul(speed!, ratio!), WINDAGE_EXPONENT), WINDAGE);
    const generator = sub(div(mul(main, efficiency!), ratio!), windage);
    const brake = add(scale(main, 1.6), scale(mul(speed!, speed!), 7.5));
    return [main, generator, brake];
  },

  derivative([power, speed, ratio, efficiency, oil], code) {
    const thin = Math.exp(-THINNING * (oil! - 40));
    const main = power! / speed! - BEARING * speed! ** 1.5 * thin;
    const mainBySpeed = -power! / speed! ** 2 - 1.5 * BEARING * Math.sqrt(speed!) * thin;
    const mainByOil = code.temperatureSign * BEARING * speed! ** 1.5 * THINNING * thin;
    const windageSlope = WINDAGE * WINDAGE_EXPONENT * (speed! * ratio!) ** (WINDAGE_EXPONENT - 1);
    const part = efficiency! / ratio!;
    const unit = code.efficiencyInPercent ? 0.01 : 1;
    return [
      [1 / speed!, mainBySpeed, 0, 0, mainByOil],
      [
        part / speed!,
        mainBySpeed * part - windageSlope * ratio!,
        (-main * part) / ratio! - windageSlope * speed!,
        (main / ratio!) * unit,
        mainByOil * part,
      ],
      [1.6 / speed!, 1.6 * mainBySpeed + 15 * speed!, 0, 0, 1.6 * mainByOil],
    ];
  },
};
