import type { Problem } from "./problem.ts";
import { fourPoints, minus, plus, power, two } from "./problem.ts";

/** Problem 1. */
export const rosenbrock: Problem = {
  name: "rosenbrock",
  residuals: (f, x) => {
    const [x1, x2] = two(x);
    return [f.scale(f.sub(x2, f.mul(x1, x1)), 10), f.sub(f.of(1), x1)];
  },
  jacobian: (x) => [
    [-20 * two(x)[0], 10],
    [-1, 0],
  ],
  points: fourPoints("rosenbrock"),
};

/** Problem 2. */
export const freudensteinRoth: Problem = {
  name: "freudenstein_roth",
  residuals: (f, x) => {
    const [x1, x2] = two(x);
    const first = f.mul(minus(f, f.mul(f.sub(f.of(5), x2), x2), 2), x2);
    const second = f.mul(minus(f, f.mul(plus(f, x2, 1), x2), 14), x2);
    return [f.add(minus(f, x1, 13), first), f.add(minus(f, x1, 29), second)];
  },
  jacobian: (x) => {
    const x2 = two(x)[1];
    return [
      [1, x2 * (10 - 3 * x2) - 2],
      [1, x2 * (2 + 3 * x2) - 14],
    ];
  },
  points: fourPoints("freudenstein_roth"),
};

/** Problem 3. */
export const powellBadlyScaled: Problem = {
  name: "powell_badly_scaled",
  residuals: (f, x) => {
    const [x1, x2] = two(x);
    return [
      minus(f, f.scale(f.mul(x1, x2), 1e4), 1),
      minus(f, f.add(f.exp(f.scale(x1, -1)), f.exp(f.scale(x2, -1))), 1.0001),
    ];
  },
  jacobian: (x) => {
    const [x1, x2] = two(x);
    return [
      [1e4 * x2, 1e4 * x1],
      [-Math.exp(-x1), -Math.exp(-x2)],
    ];
  },
  points: fourPoints("powell_badly_scaled"),
};

/** Problem 4. */
export const brownBadlyScaled: Problem = {
  name: "brown_badly_scaled",
  residuals: (f, x) => {
    const [x1, x2] = two(x);
    return [minus(f, x1, 1e6), minus(f, x2, 2e-6), minus(f, f.mul(x1, x2), 2)];
  },
  jacobian: (x) => {
    const [x1, x2] = two(x);
    return [
      [1, 0],
      [0, 1],
      [x2, x1],
    ];
  },
  points: fourPoints("brown_badly_scaled"),
};

/** Problem 5. */
export const beale: Problem = {
  name: "beale",
  residuals: (f, x) => {
    const [x1, x2] = two(x);
    return [1.5, 2.25, 2.625].map((y, k) => f.sub(f.of(y), f.mul(x1, f.sub(f.of(1), power(f, x2, k + 1)))));
  },
  jacobian: (x) => {
    const [x1, x2] = two(x);
    return [1, 2, 3].map((i) => [-(1 - x2 ** i), i * x1 * x2 ** (i - 1)]);
  },
  points: fourPoints("beale"),
};
