import type { Problem } from "./problem.ts";
import { at, four, fourPoints, minus, three } from "./problem.ts";
import { DATA } from "./published.ts";

/** Problem 8. */
export const bard: Problem = {
  name: "bard",
  residuals: (f, x) => {
    const [x1, x2, x3] = three(x);
    return DATA.bard.map((y, k) => {
      const u = k + 1;
      const v = 15 - k;
      const below = f.add(f.scale(x2, v), f.scale(x3, Math.min(u, v)));
      return f.sub(f.of(y), f.add(x1, f.div(f.of(u), below)));
    });
  },
  jacobian: (x) => {
    const [, x2, x3] = three(x);
    return DATA.bard.map((_, k) => {
      const u = k + 1;
      const v = 15 - k;
      const w = Math.min(u, v);
      const below = (v * x2 + w * x3) ** 2;
      return [-1, (u * v) / below, (u * w) / below];
    });
  },
  points: fourPoints("bard"),
};

/** Problem 9. */
export const gaussian: Problem = {
  name: "gaussian",
  residuals: (f, x) => {
    const [x1, x2, x3] = three(x);
    return DATA.gaussian.map((y, k) => {
      const away = f.sub(f.of((7 - k) / 2), x3);
      return minus(f, f.mul(x1, f.exp(f.scale(f.mul(x2, f.mul(away, away)), -0.5))), y);
    });
  },
  jacobian: (x) => {
    const [x1, x2, x3] = three(x);
    return DATA.gaussian.map((_, k) => {
      const away = (7 - k) / 2 - x3;
      const bell = Math.exp((-x2 * away * away) / 2);
      return [bell, (-x1 * bell * away * away) / 2, x1 * x2 * bell * away];
    });
  },
  points: fourPoints("gaussian"),
};

/** Problem 10. */
export const meyer: Problem = {
  name: "meyer",
  residuals: (f, x) => {
    const [x1, x2, x3] = three(x);
    return DATA.meyer.map((y, k) => {
      const below = f.add(f.of(45 + 5 * (k + 1)), x3);
      return minus(f, f.mul(x1, f.exp(f.div(x2, below))), y);
    });
  },
  jacobian: (x) => {
    const [x1, x2, x3] = three(x);
    return DATA.meyer.map((_, k) => {
      const below = 45 + 5 * (k + 1) + x3;
      const e = Math.exp(x2 / below);
      return [e, (x1 * e) / below, (-x1 * x2 * e) / (below * below)];
    });
  },
  points: fourPoints("meyer"),
};

/** Problem 15. */
export const kowalikOsborne: Problem = {
  name: "kowalik_osborne",
  residuals: (f, x) => {
    const [x1, x2, x3, x4] = four(x);
    return DATA.kowalik.map((y, k) => {
      const u = at(DATA.kowalikU, k);
      const above = f.add(f.of(u * u), f.scale(x2, u));
      const below = f.add(f.add(f.of(u * u), f.scale(x3, u)), x4);
      return f.sub(f.of(y), f.div(f.mul(x1, above), below));
    });
  },
  jacobian: (x) => {
    const [x1, x2, x3, x4] = four(x);
    return DATA.kowalikU.map((u) => {
      const above = u * u + u * x2;
      const below = u * u + u * x3 + x4;
      const ratio = (x1 * above) / (below * below);
      return [-above / below, (-x1 * u) / below, ratio * u, ratio];
    });
  },
  points: fourPoints("kowalik_osborne"),
};

/** Problem 17. */
export const osborne1: Problem = {
  name: "osborne1",
  residuals: (f, x) => {
    const [x1, x2, x3, x4] = four(x);
    const x5 = at(x, 4);
    return DATA.osborne1.map((y, k) => {
      const t = 10 * k;
      const first = f.mul(x2, f.exp(f.scale(x4, -t)));
      const second = f.mul(x3, f.exp(f.scale(x5, -t)));
      return f.sub(f.of(y), f.add(x1, f.add(first, second)));
    });
  },
  jacobian: (x) => {
    const [, x2, x3, x4] = four(x);
    const x5 = at(x, 4);
    return DATA.osborne1.map((_, k) => {
      const t = 10 * k;
      const e4 = Math.exp(-t * x4);
      const e5 = Math.exp(-t * x5);
      return [-1, -e4, -e5, t * x2 * e4, t * x3 * e5];
    });
  },
  points: fourPoints("osborne1"),
};
