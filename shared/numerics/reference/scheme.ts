import type { ReferenceMethod } from "../../domain/vocabulary.ts";

/** How the error of a method depends on its step. */
export interface Scheme {
  /** Order p of the truncation: 1 for one-sided differences, 2 for central ones and the complex step. */
  readonly order: 1 | 2;
  /** c, noisy values over h: 2 for one-sided differences, 1 for central ones (two over 2h), 0 for the complex step. */
  readonly noisyValues: 0 | 1 | 2;
}

export const ONE_SIDED: Scheme = { order: 1, noisyValues: 2 };
export const CENTRAL: Scheme = { order: 2, noisyValues: 1 };
export const COMPLEX: Scheme = { order: 2, noisyValues: 0 };

/** Scheme of a method, or null where it has no step. */
export function schemeOf(method: ReferenceMethod): Scheme | null {
  switch (method) {
    case "forward-difference":
    case "backward-difference":
      return ONE_SIDED;
    case "central-difference":
      return CENTRAL;
    case "complex-step":
      return COMPLEX;
    case "analytic":
    case "ad-forward":
    case "ad-reverse":
    case "high-precision":
      return null;
  }
}

/** True for the methods that subtract values of the function, and so may see no change at all. */
export function isDifference(method: ReferenceMethod): boolean {
  return (schemeOf(method)?.noisyValues ?? 0) > 0;
}
