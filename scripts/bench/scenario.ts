import type { BuildDocument } from "../../shared/schemas/build.ts";
import { mulberry32 } from "../../tests/support/random.ts";

export const shaOf = (n: number): string => n.toString(16).padStart(40, "0");

export interface Shape {
  readonly blocks: number;
  readonly rows: number;
  readonly columns: number;
}

/**
 * A build of made-up numbers with one central difference a block, right to 1e-9. The same seed gives the same numbers,
 * so that a commit may change all of them, those of one block, or none.
 */
export function makeBuild(commit: number, shape: Shape, seed: number, lane = "default"): BuildDocument {
  const parents = commit > 1 ? [shaOf(commit - 1)] : [];
  return {
    format: "clinograph.build/1",
    commit: { sha: shaOf(commit), parents, branch: "main", committedAt: new Date(1.7e12 + commit * 6e4).toISOString() },
    lane,
    run: { id: `bench ${commit}` },
    blocks: Array.from({ length: shape.blocks }, (_, at) => makeBlock(at, shape, seed + at)),
  };
}

function makeBlock(at: number, { rows, columns }: Shape, seed: number): BuildDocument["blocks"][number] {
  const random = mulberry32(seed);
  // Full mantissas, as computed numbers have: 32 random bits alone would compress.
  const full = () => 2 * (random() + random() * 2 ** -32) - 1;
  const derivative = Array.from({ length: rows }, () => Array.from({ length: columns }, full));
  const values = derivative.map((row) => row.map((value) => value * (1 + 1e-9 * random())));
  return {
    model: `bench.model${at}`,
    output: { name: "f", size: rows },
    input: { name: "x", size: columns },
    derivative: { method: "analytic", values: derivative },
    references: [{ method: "central-difference", step: 1e-5, values }],
  };
}

export function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] as number;
}

/** One line of a result: a ratio or size with its goal. */
export function line(what: string, value: number, unit: string, goal: number): void {
  const kept = value <= goal ? "holds" : "MISSED";
  console.log(`  ${what}: ${value.toFixed(value < 10 ? 2 : 0)} ${unit} (goal: at most ${goal}) ${kept}`);
}
