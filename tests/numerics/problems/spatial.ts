import type { Problem } from "./problem.ts";
import { four, fourPoints, minus, range, three } from "./problem.ts";

/** Problem 7. */
export const helicalValley: Problem = {
  name: "helical_valley",
  residuals: (f, x) => {
    const [x1, x2, x3] = three(x);
    const angle = f.scale(f.atan(f.div(x2, x1)), 1 / (2 * Math.PI));
    const theta = f.re(x1) < 0 ? f.add(angle, f.of(0.5)) : angle;
    const radius = f.sqrt(f.add(f.mul(x1, x1), f.mul(x2, x2)));
    return [f.scale(f.sub(x3, f.scale(theta, 10)), 10), f.scale(minus(f, radius, 1), 10), x3];
  },
  jacobian: (x) => {
    const [x1, x2] = three(x);
    const squared = x1 * x1 + x2 * x2;
    const radius = Math.sqrt(squared);
    return [
      [((100 / (2 * Math.PI)) * x2) / squared, ((-100 / (2 * Math.PI)) * x1) / squared, 10],
      [(10 * x1) / radius, (10 * x2) / radius, 0],
      [0, 0, 1],
    ];
  },
  points: fourPoints("helical_valley"),
};

/** Problem 12 with ten residuals. */
export const box3d: Problem = {
  name: "box3d_m10",
  residuals: (f, x) => {
    const [x1, x2, x3] = three(x);
    return range(1, 10).map((i) => {
      const t = 0.1 * i;
      const both = f.sub(f.exp(f.scale(x1, -t)), f.exp(f.scale(x2, -t)));
      return f.sub(both, f.scale(x3, Math.exp(-t) - Math.exp(-10 * t)));
    });
  },
  jacobian: (x) => {
    const [x1, x2] = three(x);
    return range(1, 10).map((i) => {
      const t = 0.1 * i;
      return [-t * Math.exp(-t * x1), t * Math.exp(-t * x2), -(Math.exp(-t) - Math.exp(-10 * t))];
    });
  },
  points: fourPoints("box3d_m10"),
};

/** Problem 13. */
export const powellSingular: Problem = {
  name: "powell_singular",
  residuals: (f, x) => {
    const [x1, x2, x3, x4] = four(x);
    const third = f.sub(x2, f.scale(x3, 2));
    const fourth = f.sub(x1, x4);
    return [
      f.add(x1, f.scale(x2, 10)),
      f.scale(f.sub(x3, x4), Math.sqrt(5)),
      f.mul(third, third),
      f.scale(f.mul(fourth, fourth), Math.sqrt(10)),
    ];
  },
  jacobian: (x) => {
    const [x1, x2, x3, x4] = four(x);
    const third = 2 * (x2 - 2 * x3);
    const fourth = 2 * Math.sqrt(10) * (x1 - x4);
    return [
      [1, 10, 0, 0],
      [0, 0, Math.sqrt(5), -Math.sqrt(5)],
      [0, third, -2 * third, 0],
      [fourth, 0, 0, -fourth],
    ];
  },
  points: fourPoints("powell_singular"),
};

/** Problem 14. */
export const wood: Problem = {
  name: "wood",
  residuals: (f, x) => {
    const [x1, x2, x3, x4] = four(x);
    return [
      f.scale(f.sub(x2, f.mul(x1, x1)), 10),
      f.sub(f.of(1), x1),
      f.scale(f.sub(x4, f.mul(x3, x3)), Math.sqrt(90)),
      f.sub(f.of(1), x3),
      f.scale(minus(f, f.add(x2, x4), 2), Math.sqrt(10)),
      f.scale(f.sub(x2, x4), 1 / Math.sqrt(10)),
    ];
  },
  jacobian: (x) => {
    const [x1, , x3] = four(x);
    const root = Math.sqrt(10);
    return [
      [-20 * x1, 10, 0, 0],
      [-1, 0, 0, 0],
      [0, 0, -2 * Math.sqrt(90) * x3, Math.sqrt(90)],
      [0, 0, -1, 0],
      [0, root, 0, root],
      [0, 1 / root, 0, -1 / root],
    ];
  },
  points: fourPoints("wood"),
};
