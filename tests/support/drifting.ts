import type { BuildDocument } from "../../shared/schemas/build.ts";
import { blockOf, THRUST } from "./hull.ts";
import { mulberry32 } from "./random.ts";

type Block = BuildDocument["blocks"][number];

/** Standard normal values, the same for the same seed (G. E. P. Box, M. E. Muller, Ann. Math. Stat. 29, 1958). */
export function normalValues(seed: number): () => number {
  const random = mulberry32(seed);
  return () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
}

/** rotor.thrust with these relative errors, in powers of ten, one an entry. */
export function withErrors(exponents: readonly (readonly number[])[], model = "rotor.thrust"): Block {
  const derivative = THRUST.map((row, r) => row.map((value, c) => value * (1 + 10 ** (exponents[r]?.[c] ?? -9))));
  return blockOf({ model, derivative, reference: THRUST });
}

/** `builds` blocks whose errors lie about 10^-9; from `from` on those of `entry` rise by `slope` decades a build. */
export function climbingBlocks(
  builds: number,
  from: number,
  slope: number,
  options: { readonly seed?: number; readonly entry?: readonly [number, number]; readonly noise?: number } = {},
): Block[] {
  const { seed = 1, entry = [1, 0], noise = 0.1 } = options;
  const normal = normalValues(seed);
  return Array.from({ length: builds }, (_, at) =>
    withErrors(
      THRUST.map((row, r) =>
        row.map((_value, c) => {
          const rise = r === entry[0] && c === entry[1] ? slope * Math.max(0, at - from + 1) : 0;
          return -9 + noise * normal() + rise;
        }),
      ),
    ),
  );
}
