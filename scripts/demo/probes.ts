import type { Code } from "./code.ts";
import { byDualNumbers, outputs } from "./jacobians.ts";
import type { Rows } from "./jacobians.ts";
import type { DemoModel } from "./models/model.ts";
import { real } from "./algebra/real.ts";
import type { WireBlock } from "./blocks.ts";

type WireProbe = NonNullable<WireBlock["probes"]>[number];

const STEPS = [1e-1, 1e-2, 1e-3, 1e-4, 1e-5];

const dot = (a: readonly number[], b: readonly number[]): number => a.reduce((sum, value, k) => sum + value * b[k]!, 0);
const times = (rows: Rows, v: readonly number[]): number[] => rows.map((row) => dot(row, v));
const timesTransposed = (rows: Rows, w: readonly number[]): number[] =>
  rows[0]!.map((_, j) => rows.reduce((sum, row, i) => sum + row[j]! * w[i]!, 0));
const sizes = (values: readonly number[]): number[] => values.map(Math.abs);

/** A direction that is the same for every build, none of its elements small. */
const direction = (length: number, seed: number): number[] =>
  Array.from({ length }, (_, k) => (k % 2 === 0 ? 1 : -1) * (1 + 0.5 * Math.sin(seed + 5 * k)));

/**
 * Two probes of a model, evaluated for real: dual numbers pushed forward along v against the delivered derivative pulled
 * back along w; and how w.F leaves the line that the delivered gradient draws along v.
 */
export function probesOf(model: DemoModel, code: Code, delivered: Rows): WireProbe[] {
  const x = model.input.values;
  const v = direction(x.length, 7).map((part, j) => part * Math.max(Math.abs(x[j]!), 0.1));
  const w = direction(delivered.length, 11);
  const pulledBack = timesTransposed(delivered, w);
  const forward = dot(w, times(byDualNumbers(model, code), v));
  const reverse = dot(pulledBack, v);
  const scale = dot(sizes(w), times(delivered.map(sizes), sizes(v)));
  const along = (h: number) =>
    dot(
      w,
      model.evaluate(
        real,
        x.map((value, j) => value + h * v[j]!),
        code,
      ),
    );
  const here = dot(w, outputs(model, code));
  return [
    { kind: "dot-product", label: "seed 7", forward, reverse, scale },
    {
      kind: "taylor",
      label: "seed 7",
      steps: STEPS,
      remainders: STEPS.map((h) => Math.abs(along(h) - here - h * reverse)),
      scale: Math.abs(reverse),
      value: dot(sizes(w), sizes(outputs(model, code))),
    },
  ];
}
