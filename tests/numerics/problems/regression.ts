import type { Field } from "../support/field.ts";
import { readReference } from "../support/readReference.ts";
import type { Problem } from "./problem.ts";
import { at, four, minus, plus, three, two } from "./problem.ts";

/** A regression model y(x; b), generic in b, with its hand-written partial derivatives by b. */
interface Model {
  value<T>(f: Field<T>, b: readonly T[], x: number): T;
  partials(b: readonly number[], x: number): number[];
}

/** One certified data set: x and y of the observations, parameters at the minimum. */
export interface DataSet {
  readonly parameters: readonly number[];
  /** Standard deviations of the parameters. */
  readonly deviations: readonly number[];
  /** Residual sum of squares. */
  readonly rss: number;
  readonly x: readonly number[];
  readonly y: readonly number[];
}

const saturating: Model = {
  value: (f, b, x) => f.mul(at(b, 0), f.sub(f.of(1), f.exp(f.scale(at(b, 1), -x)))),
  partials: (b, x) => {
    const [b1, b2] = two(b);
    return [-Math.expm1(-b2 * x), b1 * x * Math.exp(-b2 * x)];
  },
};

const misra1b: Model = {
  value: (f, b, x) => {
    const base = plus(f, f.scale(at(b, 1), x / 2), 1);
    return f.mul(at(b, 0), f.sub(f.of(1), f.div(f.of(1), f.mul(base, base))));
  },
  partials: (b, x) => {
    const [b1, b2] = two(b);
    const base = 1 + (b2 * x) / 2;
    return [1 - base ** -2, b1 * x * base ** -3];
  },
};

/** Ratio of two cubics. */
const cubics: Model = {
  value: (f, b, x) => {
    const sum = (first: number, count: number) =>
      Array.from({ length: count }, (_, k) => f.scale(at(b, first + k), x ** (k + 4 - count))).reduce(f.add);
    return f.div(sum(0, 4), plus(f, sum(4, 3), 1));
  },
  partials: (b, x) => {
    const above = at(b, 0) + x * (at(b, 1) + x * (at(b, 2) + x * at(b, 3)));
    const below = 1 + x * (at(b, 4) + x * (at(b, 5) + x * at(b, 6)));
    const ratio = -above / below ** 2;
    return [1 / below, x / below, x ** 2 / below, x ** 3 / below, x * ratio, x ** 2 * ratio, x ** 3 * ratio];
  },
};

const quadratics: Model = {
  value: (f, b, x) => {
    const [b1, b2, b3, b4] = four(b);
    return f.div(f.mul(b1, plus(f, f.scale(b2, x), x * x)), f.add(plus(f, f.scale(b3, x), x * x), b4));
  },
  partials: (b, x) => {
    const [b1, b2, b3, b4] = four(b);
    const above = x * x + x * b2;
    const below = x * x + x * b3 + b4;
    const ratio = (-b1 * above) / below ** 2;
    return [above / below, (b1 * x) / below, x * ratio, ratio];
  },
};

const shifted: Model = {
  value: (f, b, x) => f.mul(at(b, 0), f.exp(f.div(at(b, 1), plus(f, at(b, 2), x)))),
  partials: (b, x) => {
    const [b1, b2, b3] = three(b);
    const e = Math.exp(b2 / (x + b3));
    return [e, (b1 * e) / (x + b3), (-b1 * b2 * e) / (x + b3) ** 2];
  },
};

const twoDecays: Model = {
  value: (f, b, x) => {
    const decay = (k: number) => f.mul(at(b, k), f.exp(f.scale(at(b, k + 2), -x)));
    return f.add(at(b, 0), f.add(decay(1), decay(2)));
  },
  partials: (b, x) => {
    const [, b2, b3, b4] = four(b);
    const first = Math.exp(-x * b4);
    const second = Math.exp(-x * at(b, 4));
    return [1, first, second, -x * b2 * first, -x * b3 * second];
  },
};

const bell: Model = {
  value: (f, b, x) => {
    const [b1, b2, b3] = three(b);
    const z = f.div(f.sub(f.of(x), b3), b2);
    return f.mul(f.div(b1, b2), f.exp(f.scale(f.mul(z, z), -0.5)));
  },
  partials: (b, x) => {
    const [b1, b2, b3] = three(b);
    const z = (x - b3) / b2;
    const e = Math.exp(-z * z * 0.5);
    return [e / b2, (b1 * e * (z * z - 1)) / b2 ** 2, (b1 * z * e) / b2 ** 2];
  },
};

const logistic: Model = {
  value: (f, b, x) => f.div(at(b, 0), plus(f, f.exp(f.sub(at(b, 1), f.scale(at(b, 2), x))), 1)),
  partials: (b, x) => {
    const [b1, b2, b3] = three(b);
    const e = Math.exp(b2 - b3 * x);
    return [1 / (1 + e), (-b1 * e) / (1 + e) ** 2, (b1 * x * e) / (1 + e) ** 2];
  },
};

const generalLogistic: Model = {
  value: (f, b, x) => {
    const [b1, b2, b3, b4] = four(b);
    const base = plus(f, f.exp(f.sub(b2, f.scale(b3, x))), 1);
    return f.mul(b1, f.exp(f.scale(f.div(f.log(base), b4), -1)));
  },
  partials: (b, x) => {
    const [b1, b2, b3, b4] = four(b);
    const e = Math.exp(b2 - b3 * x);
    const curve = (1 + e) ** (-1 / b4);
    const slope = ((b1 / b4) * e * curve) / (1 + e);
    return [curve, -slope, x * slope, ((b1 * Math.log1p(e)) / b4 ** 2) * curve];
  },
};

const powerLaw: Model = {
  value: (f, b, x) => f.mul(at(b, 0), f.exp(f.scale(at(b, 1), Math.log(x)))),
  partials: (b, x) => {
    const [b1, b2] = two(b);
    return [x ** b2, b1 * x ** b2 * Math.log(x)];
  },
};

const MODELS: Readonly<Record<string, Model>> = {
  Misra1a: saturating,
  BoxBOD: saturating,
  Misra1b: misra1b,
  Hahn1: cubics,
  Thurber: cubics,
  MGH09: quadratics,
  MGH10: shifted,
  MGH17: twoDecays,
  Eckerle4: bell,
  Rat42: logistic,
  Rat43: generalLogistic,
  DanWood: powerLaw,
};

const SETS = readReference<{ readonly sets: Readonly<Record<string, DataSet>> }>("nist-strd/nonlinear.json").sets;

/** The data sets with a problem each: residuals y(x; b) - y, one row an observation, at the certified parameters. */
export const REGRESSIONS = Object.entries(SETS).map(([name, set]): { name: string; set: DataSet; problem: Problem } => {
  const model = MODELS[name];
  if (model === undefined) throw new RangeError(`no model for ${name}`);
  const problem: Problem = {
    name,
    residuals: (f, b) => set.x.map((x, i) => minus(f, model.value(f, b, x), at(set.y, i))),
    jacobian: (b) => set.x.map((x) => model.partials(b, x)),
    points: [set.parameters],
  };
  return { name, set, problem };
});
