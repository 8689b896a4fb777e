import type { Verdict } from "../../shared/domain/vocabulary.ts";

/** A mark as strokes and fills on a 12 x 12 field whose centre is (6, 6). */
export interface MarkShape {
  readonly path: string;
  readonly filled: boolean;
}

/** Hollow ring, solid lozenge, ring with a bar through it, small dot, saltire: told apart without colour. */
export const MARKS: Record<Verdict, MarkShape> = {
  agrees: { path: "M6 2.6a3.4 3.4 0 1 1 0 6.8a3.4 3.4 0 1 1 0-6.8Z", filled: false },
  disagrees: { path: "M6 .8 11.2 6 6 11.2 .8 6Z", filled: true },
  unresolved: { path: "M6 1.8a4.2 4.2 0 1 1 0 8.4a4.2 4.2 0 1 1 0-8.4ZM1.8 6h8.4", filled: false },
  unreferenced: { path: "M6 4.2a1.8 1.8 0 1 1 0 3.6a1.8 1.8 0 1 1 0-3.6Z", filled: true },
  invalid: { path: "M2 2 10 10M10 2 2 10", filled: false },
};
