import type { Problem } from "./problem.ts";
import { four, fourPoints, minus, range } from "./problem.ts";

/** Problem 16 with twenty residuals. */
export const brownDennis: Problem = {
  name: "brown_dennis_m20",
  residuals: (f, x) => {
    const [x1, x2, x3, x4] = four(x);
    return range(1, 20).map((i) => {
      const t = i / 5;
      const first = minus(f, f.add(x1, f.scale(x2, t)), Math.exp(t));
      const second = minus(f, f.add(x3, f.scale(x4, Math.sin(t))), Math.cos(t));
      return f.add(f.mul(first, first), f.mul(second, second));
    });
  },
  jacobian: (x) => {
    const [x1, x2, x3, x4] = four(x);
    return range(1, 20).map((i) => {
      const t = i / 5;
      const first = 2 * (x1 + t * x2 - Math.exp(t));
      const second = 2 * (x3 + x4 * Math.sin(t) - Math.cos(t));
      return [first, t * first, second, second * Math.sin(t)];
    });
  },
  points: fourPoints("brown_dennis_m20"),
};

/** Problem 27 with ten unknowns. */
export const brownAlmostLinear: Problem = {
  name: "brown_almost_linear_n10",
  residuals: (f, x) => {
    const sum = x.reduce((total, value) => f.add(total, value), f.of(0));
    const product = x.reduce((total, value) => f.mul(total, value), f.of(1));
    return x.map((value, i) => (i < x.length - 1 ? minus(f, f.add(value, sum), x.length + 1) : minus(f, product, 1)));
  },
  jacobian: (x) =>
    x.map((_, i) =>
      x.map((_unused, j) => {
        if (i < x.length - 1) return i === j ? 2 : 1;
        return x.reduce((total, value, k) => (k === j ? total : total * value), 1);
      }),
    ),
  points: fourPoints("brown_almost_linear_n10"),
};
