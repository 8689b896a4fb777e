import type { Width } from "./tiles.ts";

/**
 * Kinds of planes in a snapshot; the number is stored, so numbers are never used again for something else.
 * `posted` planes hold what a reference of the posting said, by reference and step; their length is rows x covered
 * columns. Where it equals the chosen reference the tiles are the same ones and cost nothing. `columnSteps` holds the
 * steps of a posted plane where they differ by column, `stated` the uncertainty that came with a reference.
 */
export const PLANE_KIND = {
  derivative: 1,
  reference: 2,
  resolution: 3,
  verdict: 4,
  source: 5,
  step: 6,
  outputValues: 7,
  inputValues: 8,
  posted: 9,
  motion: 10,
  age: 11,
  columnSteps: 12,
  stated: 13,
} as const;
export type PlaneName = keyof typeof PLANE_KIND;

export const PLANE_WIDTH: Record<PlaneName, Width> = {
  derivative: 8,
  reference: 8,
  resolution: 4,
  verdict: 1,
  source: 1,
  step: 1,
  outputValues: 8,
  inputValues: 8,
  posted: 8,
  motion: 1,
  age: 1,
  columnSteps: 8,
  stated: 8,
};

const NAME_OF = new Map<number, PlaneName>(Object.entries(PLANE_KIND).map(([name, kind]) => [kind, name as PlaneName]));

/** One plane of a snapshot: what it holds and its tiles in order. */
export interface PlaneTiles<T> {
  readonly name: PlaneName;
  /** Index of the reference and of its step for `posted` planes, else 0. */
  readonly reference: number;
  readonly step: number;
  readonly tiles: readonly T[];
}

/** Packs the list of planes into 32-bit numbers: kind, reference, step, count of tiles, their ids. */
export function packPlanes(planes: readonly PlaneTiles<number>[]): Buffer {
  const numbers = planes.flatMap((p) => [PLANE_KIND[p.name], p.reference, p.step, p.tiles.length, ...p.tiles]);
  return Buffer.from(Uint32Array.from(numbers).buffer);
}

export function unpackPlanes(packed: Buffer): PlaneTiles<number>[] {
  const numbers = new Uint32Array(new Uint8Array(packed).buffer);
  const planes: PlaneTiles<number>[] = [];
  for (let at = 0; at < numbers.length;) {
    const [kind, reference, step, count] = numbers.subarray(at, at + 4);
    const name = NAME_OF.get(kind);
    if (name === undefined) throw new RangeError(`planes: kind ${kind} is not known`);
    planes.push({ name, reference, step, tiles: [...numbers.subarray(at + 4, at + 4 + count)] });
    at += 4 + count;
  }
  return planes;
}
