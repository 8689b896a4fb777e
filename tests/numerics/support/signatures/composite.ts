import type { Problem } from "../../problems/problem.ts";

/**
 * Published problems side by side as one: outputs and inputs one after another, so that the Jacobian has a block of each
 * problem on its diagonal and exact zeros everywhere else.
 */
export function sideBySide(parts: readonly Problem[]): Problem {
  const sizes = parts.map((part) => part.points[0]?.length ?? 0);
  const cut = <T>(x: readonly T[]): (readonly T[])[] => {
    let start = 0;
    return sizes.map((size) => {
      start += size;
      return x.slice(start - size, start);
    });
  };
  const points = Math.min(...parts.map((part) => part.points.length));
  return {
    name: parts.map((part) => part.name).join(" + "),
    residuals: (field, x) => {
      const own = cut(x);
      return parts.flatMap((part, p) => part.residuals(field, own[p] ?? []));
    },
    jacobian: (x) => {
      const own = cut(x);
      return parts.flatMap((part, p) => {
        const before = own.slice(0, p).reduce((sum, one) => sum + one.length, 0);
        const after = x.length - before - (own[p]?.length ?? 0);
        const zeros = (count: number) => new Array<number>(count).fill(0);
        return part.jacobian(own[p] ?? []).map((row) => [...zeros(before), ...row, ...zeros(after)]);
      });
    },
    points: Array.from({ length: points }, (_, k) => parts.flatMap((part) => part.points[k] ?? [])),
  };
}
