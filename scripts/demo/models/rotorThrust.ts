import { product } from "../algebra/algebra.ts";
import type { Algebra } from "../algebra/algebra.ts";
import type { Code } from "../code.ts";
import { SEA_WATER_DENSITY } from "./model.ts";
import type { DemoModel } from "./model.ts";

/** Flow in each state of the tide, as a part of the design speed. */
const TIDE = [0.6, 0.8, 1, 1.25];
const STATES = ["neap ebb", "neap flood", "spring ebb", "spring flood"];

const operation = {
  name: "operation",
  elements: ["speed ratio", "rotor speed, rad/s", "pitch, deg", "radius, m"],
  values: [1, 1.25, 2.5, 8.75],
};
const sources = ["src/rotor/thrust.f90", "src/rotor/thrust_derivative.f90"];

interface State<T> {
  readonly flow: T;
  readonly coefficient: T;
  readonly area: T;
}

/** Flow speed, thrust coefficient and disc area in one state of the tide. */
function stateOf<T>(algebra: Algebra<T>, [ratio, speed, pitch, radius]: readonly T[], tide: number, code: Code) {
  const { add, sub, mul, div, scale, exp, of } = algebra;
  const flow = scale(ratio!, tide * code.flowSpeed);
  const tipSpeedRatio = div(mul(speed!, radius!), flow);
  const solid = sub(of(1), exp(scale(tipSpeedRatio, -1 / 3.2)));
  const pitched = sub(of(1), add(scale(pitch!, 0.018), scale(mul(pitch!, pitch!), 0.0009)));
  const loss = code.tipLoss ? sub(of(1), scale(exp(scale(tipSpeedRatio, -0.45)), 0.35)) : of(1);
  const coefficient = scale(product(algebra, solid, pitched, loss), 0.88);
  return { flow, coefficient, area: scale(mul(radius!, radius!), Math.PI) } satisfies State<T>;
}

function thrustOf<T>(algebra: Algebra<T>, { flow, coefficient, area }: State<T>): T {
  return algebra.scale(product(algebra, area, flow, flow, coefficient), 0.5 * SEA_WATER_DENSITY);
}

/** Thrust on the rotor, N, in four states of the tide. */
export const rotorThrust: DemoModel = {
  model: "rotor.thrust",
  output: { name: "thrust", unit: "N", elements: STATES },
  input: operation,
  sources,

  evaluate<T>(algebra: Algebra<T>, x: readonly T[], code: Code): T[] {
    return TIDE.map((tide) => thrustOf(algebra, stateOf(algebra, x, tide, code)));
  },

  derivative([ratio, speed, pitch, radius], code) {
    return TIDE.map((tide) => {
      const flow = ratio! * tide * code.flowSpeed;
      const lambda = (speed! * radius!) / flow;
      const solid = 1 - Math.exp(-lambda / 3.2);
      const pitched = 1 - 0.018 * pitch! - 0.0009 * pitch! ** 2;
      const knows = code.tipLoss && code.thrustKnowsTipLoss;
      const loss = knows ? 1 - 0.35 * Math.exp(-0.45 * lambda) : 1;
      const lossSlope = knows ? 0.35 * 0.45 * Math.exp(-0.45 * lambda) : 0;
      const solidSlope = Math.exp(-lambda / 3.2) / 3.2;
      const pressure = 0.5 * SEA_WATER_DENSITY * Math.PI * radius! ** 2 * flow ** 2;
      const coefficient = 0.88 * solid * pitched * loss;
      const byLambda = 0.88 * pitched * (solidSlope * loss + solid * lossSlope);
      return [
        (pressure * (2 * coefficient - byLambda * lambda)) / ratio!,
        (pressure * byLambda * lambda) / speed!,
        -pressure * 0.88 * solid * loss * (0.018 + 0.0018 * pitch!),
        (pressure * (2 * coefficient + byLambda * lambda)) / radius!,
      ];
    });
  },
};

/** Power of the rotor by momentum theory, W, in the same states; the code base differentiates it by its AD pass. */
export const rotorPower: DemoModel = {
  model: "rotor.thrust",
  output: { name: "power", unit: "W", elements: STATES },
  input: operation,
  sources,
  evaluate<T>(algebra: Algebra<T>, x: readonly T[], code: Code): T[] {
    return TIDE.map((tide) => {
      const state = stateOf(algebra, x, tide, code);
      const slowed = algebra.sqrt(algebra.sub(algebra.of(1), state.coefficient));
      const atDisc = algebra.scale(algebra.add(algebra.of(1), slowed), 0.5);
      return product(algebra, thrustOf(algebra, state), state.flow, atDisc);
    });
  },
  derivative: null,
};
