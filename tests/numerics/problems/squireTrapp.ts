import type { Problem } from "./problem.ts";
import { at, power } from "./problem.ts";

/**
 * The two worked examples of W. Squire, G. Trapp, SIAM Review 40(1):110-112, 1998, doi:10.1137/S003614459631241X,
 * at their own point 1.5 and at three more.
 */
const POINTS = [[1.5], [Math.PI / 4], [0.3], [2.25]];

export const nineHalves: Problem = {
  name: "x^(9/2)",
  residuals: (f, x) => [f.mul(power(f, at(x, 0), 4), f.sqrt(at(x, 0)))],
  jacobian: (x) => [[4.5 * at(x, 0) ** 3 * Math.sqrt(at(x, 0))]],
  points: POINTS,
};

export const exponentialOverCubes: Problem = {
  name: "e^x/(sin^3 x + cos^3 x)",
  residuals: (f, x) => {
    const angle = at(x, 0);
    return [f.div(f.exp(angle), f.add(power(f, f.sin(angle), 3), power(f, f.cos(angle), 3)))];
  },
  jacobian: (x) => {
    const t = at(x, 0);
    const below = Math.sin(t) ** 3 + Math.cos(t) ** 3;
    return [[(Math.exp(t) * (2 * Math.cos(3 * t) + 3 * Math.sin(t) + Math.sin(3 * t))) / (2 * below * below)]];
  },
  points: POINTS,
};
