import fc from "fast-check";
import type { BlockNumbers, ReferenceNumbers } from "../../../shared/numerics/types.ts";
import { reference } from "./references.ts";

/** Ordinary numbers, small whole ones (ties and zeros are common) and all that binary64 has. */
const ordinary = fc.double({ min: -1e3, max: 1e3, noNaN: true });
const few = fc.constantFrom(0, -0, 1, -1, 2, 0.5);
const finite = fc.double({ noNaN: true, noDefaultInfinity: true });
const extreme = fc.constantFrom(5e-324, -5e-324, 1e300, -1e300, Number.MAX_VALUE, -Number.MAX_VALUE, 2 ** -1022);

/** Finite numbers of every kind. */
export const anyFinite = fc.oneof(ordinary, few, finite, extreme);
/** Any number, NaN and infinities included. */
export const anyNumber = fc.oneof(
  { weight: 5, arbitrary: anyFinite },
  { weight: 1, arbitrary: fc.constantFrom(NaN, Infinity, -Infinity) },
);
/** Numbers far from the ends of the range, so that they can be scaled without losing a bit. */
export const tameNumber = fc.oneof(ordinary, few).map((value) => (Math.abs(value) < 1e-200 ? 0 : value));

const METHODS = ["forward-difference", "backward-difference", "central-difference", "complex-step"] as const;
const EXACT = ["analytic", "ad-forward", "ad-reverse", "high-precision"] as const;
const STEPS = [1e-2, 1e-3, 1e-4, 1e-5, 1e-6, 1e-8, 1e-16, 0.5];

const plane = (length: number, number: fc.Arbitrary<number>): fc.Arbitrary<Float64Array> =>
  fc.array(number, { minLength: length, maxLength: length }).map((values) => Float64Array.from(values));

function arbitraryReference(
  rows: number,
  columns: number,
  number: fc.Arbitrary<number>,
): fc.Arbitrary<ReferenceNumbers> {
  const uncertainty = fc.option(fc.constantFrom(0, 1e-9, 1e-3), { nil: null, freq: 5 });
  const stepped = fc
    .record({
      method: fc.constantFrom(...METHODS),
      steps: fc.uniqueArray(fc.constantFrom(...STEPS), { minLength: 1, maxLength: 6 }),
      stepKind: fc.constantFrom("absolute", "relative"),
      uncertainty,
    })
    .chain(({ method, steps, stepKind, uncertainty: stated }) =>
      fc.tuple(...steps.map(() => plane(rows * columns, number))).map((planes) =>
        reference(
          method,
          planes.map((values, k) => ({ step: steps[k] ?? NaN, values })),
          { stepKind, uncertainty: stated },
        ),
      ),
    );
  const exact = fc
    .tuple(fc.constantFrom(...EXACT), plane(rows * columns, number), uncertainty)
    .map(([method, values, stated]) => reference(method, [{ step: null, values }], { uncertainty: stated }));
  return fc.oneof(stepped, exact);
}

/** A block of any shape up to 5 x 5 with up to three references over all its columns. */
export function arbitraryBlock(number: fc.Arbitrary<number>): fc.Arbitrary<BlockNumbers> {
  return fc.tuple(fc.integer({ min: 0, max: 5 }), fc.integer({ min: 1, max: 5 })).chain(([rows, columns]) =>
    fc.record({
      rows: fc.constant(rows),
      columns: fc.constant(columns),
      outputValues: fc.option(plane(rows, number), { nil: null }),
      inputValues: fc.option(plane(columns, number), { nil: null }),
      derivative: plane(rows * columns, number),
      references: fc.array(arbitraryReference(rows, columns, number), { maxLength: 3 }),
    }),
  );
}
