import { product, sum } from "../algebra/algebra.ts";
import type { Algebra } from "../algebra/algebra.ts";
import type { Code } from "../code.ts";
import type { DemoModel } from "./model.ts";

const design = {
  name: "design",
  elements: ["diameter, m", "rated power, MW", "depth, m", "distance, km", "mean flow, m/s", "availability"],
  values: [17.5, 1.1, 38, 4.6, 1.9, 0.93],
};
const sources = ["src/cost/energy.f90", "src/cost/energy_derivative.f90"];

/** Part of the year's capital cost that is paid each year. */
const ANNUITY = 0.085;
const SHALLOWEST = 8;
const DEEPEST = 80;
const SEASONS = [0.92, 1.06, 1.01];

/** Energy of a year, MWh, of a rotor that runs at its rated power above a smooth knee. */
function yearlyEnergy<T>(algebra: Algebra<T>, x: readonly T[], season: number): T {
  const { mul, div, scale, sqrt, add, of } = algebra;
  const [diameter, rated, flow, availability] = [x[0]!, x[1]!, x[4]!, x[5]!];
  const speed = scale(flow, season);
  const captured = scale(product(algebra, diameter, diameter, speed, speed, speed), 1.75e-4);
  const load = div(captured, rated);
  const factor = div(load, sqrt(add(of(1), mul(load, load))));
  return scale(product(algebra, rated, factor, availability), 8766);
}

/** What is built, kEUR: turbine, foundation, cable. */
function capital<T>(algebra: Algebra<T>, x: readonly T[], code: Code): T {
  const [diameter, rated, posted, distance] = [x[0]!, x[1]!, x[2]!, x[3]!];
  const real = Math.min(DEEPEST, Math.max(SHALLOWEST, algebra.value(posted)));
  const depth = code.clipsDepth ? algebra.of(real) : posted;
  return sum(algebra, [
    algebra.scale(algebra.power(rated, 0.9), 1450),
    algebra.scale(algebra.power(diameter, 1.7), 9.5),
    algebra.scale(algebra.power(depth, 1.3), 6.1),
    algebra.scale(algebra.mul(distance, algebra.sqrt(rated)), code.cableCost),
  ]);
}

/** Capital, operation and price of energy against the design. */
export const energyCost: DemoModel = {
  model: "cost.energy",
  output: { name: "cost", elements: ["capital, kEUR", "operation, kEUR/a", "price, EUR/MWh"] },
  input: design,
  sources,

  evaluate<T>(algebra: Algebra<T>, x: readonly T[], code: Code): T[] {
    const built = capital(algebra, x, code);
    const visits = algebra.div(algebra.sqrt(x[3]!), x[5]!);
    const operation = algebra.add(algebra.scale(built, 0.035), algebra.scale(visits, 46));
    const yearly = algebra.add(algebra.scale(built, ANNUITY), operation);
    const price = algebra.scale(algebra.div(yearly, yearlyEnergy(algebra, x, 1)), 1000);
    return [built, operation, price];
  },

  derivative([diameter, rated, depth, distance, flow, availability], code) {
    const cable = code.cableCost * distance! * Math.sqrt(rated!);
    const built = 1450 * rated! ** 0.9 + 9.5 * diameter! ** 1.7 + 6.1 * depth! ** 1.3 + cable;
    const bySize = [
      9.5 * 1.7 * diameter! ** 0.7,
      1450 * 0.9 * rated! ** -0.1 + (0.5 * cable) / rated!,
      6.1 * 1.3 * depth! ** 0.3,
      cable / distance!,
      0,
      0,
    ];
    const visits = Math.sqrt(distance!) / availability!;
    const operation = 0.035 * built + 46 * visits;
    const byVisits = [0, 0, 0, (0.5 * 46 * visits) / distance!, 0, (-46 * visits) / availability!];
    const operationSlopes = bySize.map((slope, j) => 0.035 * slope + byVisits[j]!);
    const load = (1.75e-4 * diameter! ** 2 * flow! ** 3) / rated!;
    const energy = (8766 * rated! * availability! * load) / Math.sqrt(1 + load ** 2);
    // Relative slope of the energy for a relative change of the load: 1 far below the knee, 0 far above.
    const knee = 1 / (1 + load ** 2);
    const energyShares = [(2 * knee) / diameter!, (1 - knee) / rated!, 0, 0, (3 * knee) / flow!, 1 / availability!];
    const yearly = ANNUITY * built + operation;
    const known = bySize.map((slope, j) => (j === 3 && !code.priceKnowsCable ? 0 : slope));
    const price = known.map((slope, j) => {
      const yearlySlope = (ANNUITY + 0.035) * slope + byVisits[j]!;
      return (1000 * (yearlySlope - yearly * energyShares[j]!)) / energy;
    });
    return [bySize, operationSlopes, price];
  },
};

/** Energy of a low, a high and a mean year, MWh; the code base differentiates it by its AD pass. */
export const energyYield: DemoModel = {
  model: "cost.energy",
  output: { name: "energy", unit: "MWh", elements: ["low year", "high year", "mean year"] },
  input: design,
  sources,
  evaluate<T>(algebra: Algebra<T>, x: readonly T[], _: Code): T[] {
    return SEASONS.map((season) => yearlyEnergy(algebra, x, season));
  },
  derivative: null,
};
