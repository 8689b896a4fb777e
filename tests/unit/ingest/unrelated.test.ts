import fc from "fast-check";
import { expect, it } from "vitest";
import { block, build, judge } from "./documents.ts";
import type { Document } from "./documents.ts";

const number = fc.double({ min: -1e3, max: 1e3, noNaN: true });
const matrix = fc.array(fc.array(number, { minLength: 2, maxLength: 2 }), { minLength: 3, maxLength: 3 });

/** A block whose derivative and reference have nothing to do with each other. */
const anyBlock = (model: string): fc.Arbitrary<Document> =>
  fc.tuple(matrix, matrix).map(([derivative, reference]) =>
    block({
      model,
      derivative: { method: "analytic", values: derivative },
      references: [{ method: "central-difference", step: 1e-6, values: reference }],
    }),
  );

it("a block is judged the same whatever other blocks are posted beside it", () => {
  fc.assert(
    fc.property(anyBlock("rotor.thrust"), anyBlock("wake.deficit"), (one, other) => {
      const [alone] = judge(build([one])).blocks;
      const beside = judge(build([other, one])).blocks[1];
      expect(beside?.snapshot.hash).toEqual(alone?.snapshot.hash);
      expect(beside?.snapshot.counts).toEqual(alone?.snapshot.counts);
      expect(beside?.details).toBe(alone?.details);
    }),
  );
});
