/** What holds for signatures of any block. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { isBadVerdict } from "../../shared/domain/vocabulary.ts";
import { nameSignatures } from "../../shared/numerics/signatures/nameSignatures.ts";
import { matchUp } from "../../shared/numerics/signatures/matchUp.ts";
import type { BlockNumbers } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { mulberry32, shuffled } from "../support/random.ts";
import { anyNumber, arbitraryBlock } from "./support/arbitraries.ts";
import { reference } from "./support/references.ts";
import { NAMES } from "./support/signatures/faultTrials.ts";

const name = (block: BlockNumbers) => nameSignatures(block, judgeBlock(block, DEFAULT_TOLERANCES), NAMES);

/** A block of numbers that have nothing to do with each other, right to the last bit. */
function randomBlock(rows: number, columns: number, seed: number): BlockNumbers & { readonly values: Float64Array } {
  const random = mulberry32(seed);
  const values = Float64Array.from({ length: rows * columns }, () => (random() - 0.5) * 10 ** (3 * random()));
  const references = [reference("ad-forward", [{ step: null, values }])];
  return { rows, columns, outputValues: null, inputValues: null, derivative: values, references, values };
}

const shape = fc.record({
  rows: fc.integer({ min: 1, max: 9 }),
  columns: fc.integer({ min: 1, max: 9 }),
  seed: fc.integer({ min: 1, max: 1_000_000 }),
});

describe("signatures of any block", () => {
  it("speak of places that exist and hold something bad, and of none where nothing is", () => {
    fc.assert(
      fc.property(arbitraryBlock(anyNumber), (block) => {
        const judged = judgeBlock(block, DEFAULT_TOLERANCES);
        const found = nameSignatures(block, judged, NAMES);
        const bad = Array.from(judged.verdict.keys()).filter((k) => isBadVerdict(judged.verdict[k] ?? 0));
        if (bad.length === 0) expect(found).toEqual([]);
        for (const { scope, row, column, share, detail } of found) {
          expect(row !== null).toBe(scope === "row" || scope === "entry");
          expect(column !== null).toBe(scope === "column" || scope === "entry");
          const within = bad.filter(
            (k) =>
              (row ?? Math.floor(k / block.columns)) === Math.floor(k / block.columns) &&
              (column ?? k % block.columns) === k % block.columns,
          );
          expect(within.length).toBeGreaterThan(0);
          expect(share).toBeGreaterThan(0);
          expect(share).toBeLessThanOrEqual(1);
          expect(detail).toMatch(/^[A-Z0-9].*\.$/s);
          expect(detail).not.toMatch(/undefined|NaN\b.*NaN|null/);
        }
      }),
      { numRuns: 400 },
    );
  });

  it("do not change when all is scaled by a power of two", () => {
    fc.assert(
      fc.property(
        shape,
        fc.integer({ min: 0, max: 20 }),
        fc.constantFrom(-1, 2.5, Math.PI / 180, 0),
        ({ rows, columns, seed }, power, factor) => {
          const { values, ...block } = randomBlock(rows, columns, seed);
          const scaledBy = (scale: number) => {
            const right = values.map((value) => value * scale);
            const derivative = right.map((value, k) => (k % columns === 0 ? value * factor : value));
            return name({
              ...block,
              derivative,
              references: [reference("ad-forward", [{ step: null, values: right }])],
            });
          };
          expect(scaledBy(2 ** power)).toEqual(scaledBy(1));
        },
      ),
    );
  });

  it("find any order of rows, and of columns, that moves more than one", () => {
    fc.assert(
      fc.property(shape, ({ rows, columns, seed }) => {
        fc.pre(rows > 1 && columns > 1);
        const { values, ...block } = randomBlock(rows, columns, seed);
        const order = shuffled(
          mulberry32(seed),
          Array.from({ length: rows }, (_, row) => row),
        );
        fc.pre(order.some((row, at) => row !== at));
        const derivative = values.map(
          (_, k) => values[(order[Math.floor(k / columns)] ?? 0) * columns + (k % columns)] ?? NaN,
        );
        expect(name({ ...block, derivative }).map(({ code, share }) => [code, share])).toEqual([["rows-reordered", 1]]);
      }),
    );
  });

  it("name nothing in blocks of numbers that have nothing to do with their references", () => {
    fc.assert(
      fc.property(shape, ({ rows, columns, seed }) => {
        const { values, ...block } = randomBlock(rows, columns, seed);
        const derivative = randomBlock(rows, columns, seed + 1).values;
        expect(values.length).toBe(derivative.length);
        expect(name({ ...block, derivative })).toEqual([]);
      }),
    );
  });
});

describe("partners", () => {
  it("are given out so that nobody shares one, even where the first choice is taken", () => {
    expect(matchUp([[0, 1], [0], [1, 2]])).toEqual([1, 0, 2]);
    expect(matchUp([])).toEqual([]);
  });
  it("are refused where more than a fifth goes without", () => {
    expect(matchUp([[0], [0], [1], [2]])).toBeNull();
  });
});
