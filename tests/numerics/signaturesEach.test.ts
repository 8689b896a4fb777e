/** Every signature alone, on small blocks whose every number is seen; its sentence; what must not be named. */
import { describe, expect, it } from "vitest";
import { DEFAULT_TOLERANCES } from "../../shared/domain/tolerances.ts";
import { leftBehind } from "../../shared/numerics/signatures/leftBehind.ts";
import { nameSignatures } from "../../shared/numerics/signatures/nameSignatures.ts";
import type { BlockNames, NamedSignature } from "../../shared/numerics/signatures/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { mulberry32 } from "../support/random.ts";
import { block, flat } from "./support/blocks.ts";
import { reference } from "./support/references.ts";
import { NAMES } from "./support/signatures/faultTrials.ts";

type Matrix = readonly (readonly number[])[];

const R: Matrix = [
  [1.5, -0.31, 8.25, 0.077],
  [-2.6, 4.4, 0.93, 12.1],
  [0.6, 7.7, -3.9, -5.3],
];

function name(derivative: Matrix, right: Matrix = R, names: BlockNames = NAMES, rtol = 1e-6): NamedSignature[] {
  const numbers = block(derivative, [reference("complex-step", [{ step: 1e-20, values: flat(right) }])]);
  return nameSignatures(numbers, judgeBlock(numbers, { ...DEFAULT_TOLERANCES, rtol }), names);
}

const change = (right: Matrix, to: (value: number, row: number, column: number) => number): number[][] =>
  right.map((values, row) => values.map((value, column) => to(value, row, column)));

const brief = (found: readonly NamedSignature[]) =>
  found.map(({ code, scope, row, column, share }) => [code, scope, row, column, share]);

describe("a signature of the derivative", () => {
  it("of a flipped sign is told of the narrowest place", () => {
    const flip = (where: (row: number, column: number) => boolean) =>
      name(change(R, (value, row, column) => (where(row, column) ? -value : value)));
    expect(brief(flip(() => true))).toEqual([["sign-flipped", "block", null, null, 1]]);
    expect(brief(flip((row) => row === 1))).toEqual([["sign-flipped", "row", 1, null, 1]]);
    expect(brief(flip((_, column) => column === 3))).toEqual([["sign-flipped", "column", null, 3, 1]]);
    expect(brief(flip((row, column) => row === 2 && column === 0))).toEqual([["sign-flipped", "entry", 2, 0, 1]]);
    expect(flip((row) => row === 1)[0]?.detail).toBe("Row 1 (f[1]) is the reference with its sign flipped.");
    expect(flip((row, column) => row < 2 && column === 1)[0]?.detail).toBe(
      "2 of 3 entries of column 1 (x[1]) are the reference with its sign flipped.",
    );
  });

  it("of degrees for radians names the column, the number and the units", () => {
    const names: BlockNames = {
      output: NAMES.output,
      input: { name: "x", unit: null, elements: ["chord", "pitch", "cone", "twist"] },
    };
    const found = name(
      change(R, (value, _, column) => (column === 1 ? value * (Math.PI / 180) : value)),
      R,
      names,
    );
    expect(brief(found)).toEqual([["unit-factor", "column", null, 1, 1]]);
    expect(found[0]?.detail).toBe(
      "Column 1 (pitch) is the reference times 0.0174533, which is π/180: degrees where radians are meant.",
    );
    const posted: BlockNames = { ...names, input: { ...names.input, unit: "rad" } };
    const again = name(
      change(R, (value, _, column) => (column === 1 ? value * (Math.PI / 180) : value)),
      R,
      posted,
    );
    expect(again[0]?.detail).toContain("degrees where x is posted in rad.");
  });

  it("of a factor gives it, and what it may come from", () => {
    expect(name(change(R, (value) => 1.37 * value))[0]?.detail).toBe("The whole block is the reference times 1.37.");
    const half = name(change(R, (value, row, column) => (row === 0 && column === 2 ? value / 2 : value)));
    expect(half[0]).toMatchObject({ code: "scaled", scope: "entry" });
    expect(half[0]?.detail).toContain("1/2");
    const thousand = name(change(R, (value, row) => (row === 0 ? value * 1000 : value)));
    expect(thousand[0]).toMatchObject({ code: "scaled", scope: "row", row: 0 });
    expect(thousand[0]?.alternatives.join(" ")).toContain("kilometres where metres");
    const rounded = name(change(R, (value) => 0.01745 * value));
    expect(rounded[0]?.code).toBe("scaled");
    expect(rounded[0]?.alternatives.join(" ")).toContain("a rounded factor for degrees where radians");
  });

  it("does not make a factor out of one entry, unless it is plain or a unit's", () => {
    const one = (factor: number) =>
      name(change(R, (value, row, column) => (row === 1 && column === 1 ? factor * value : value)));
    expect(one(1.37)).toEqual([]);
    expect(one(0.0254)[0]?.code).toBe("unit-factor");
    expect(one(3)[0]?.code).toBe("scaled");
  });

  it("does not take small errors that happen to be alike for a factor", () => {
    // The demo's loosened solve: errors of one to three tolerances, all near a ratio of 1.
    expect(name(change(R, (value, row, column) => value * (1 + 2.2e-6 + 2e-7 * ((row + 2 * column) % 5))))).toEqual([]);
  });

  it("of a transposed block tells that storage by columns is the same", () => {
    const square = R.map((row) => row.slice(0, 3));
    const found = name(
      change(square, (_, row, column) => square[column]?.[row] ?? NaN),
      square,
    );
    expect(brief(found)).toEqual([["transposed", "block", null, null, 1]]);
    expect(found[0]?.alternatives.join(" ")).toContain("column by column");
  });

  it("of storage in the other order is found both ways", () => {
    const at = flat(R);
    const byColumns = change(
      R,
      (_, row, column) => at[((row * 4 + column) % 3) * 4 + Math.floor((row * 4 + column) / 3)] ?? NaN,
    );
    const byRows = change(R, (_, row, column) => at[column * 3 + row] ?? NaN);
    expect(name(byColumns, R)[0]).toMatchObject({ code: "storage-order", scope: "block", share: 1 });
    expect(name(byColumns, R)[0]?.alternatives.join(" ")).toContain("4 by 3, posted as 3 by 4");
    expect(name(byRows, R)[0]?.code).toBe("storage-order");
  });

  it("of lines in another order names a swap, a reversal, a shift and any other order", () => {
    const rows = (order: readonly number[]) => name(order.map((row) => R[row] ?? []));
    expect(rows([1, 0, 2])[0]).toMatchObject({ code: "rows-reordered", share: 1 });
    expect(rows([1, 0, 2])[0]?.detail).toBe("Rows 0 (f[0]) and 1 (f[1]) of the reference are swapped.");
    expect(rows([2, 0, 1])[0]?.detail).toBe(
      "The rows are those of the reference shifted down by 1, the last ones come first again.",
    );
    const columns = (order: readonly number[]) => name(R.map((row) => order.map((column) => row[column] ?? NaN)));
    expect(columns([3, 2, 1, 0])[0]?.detail).toBe("The columns are those of the reference in reverse order.");
    expect(columns([1, 2, 3, 0])[0]?.detail).toContain("shifted left by 1");
    expect(columns([1, 3, 0, 2])[0]?.detail).toBe(
      "The columns are those of the reference in another order: 0 (x[0]) holds 1 (x[1]); 1 (x[1]) holds 3 (x[3]); 2 (x[2]) holds 0 (x[0]); 3 (x[3]) holds 2 (x[2]).",
    );
  });

  it("of a term missing is exact zeros, or one product of the chain rule", () => {
    expect(brief(name(change(R, (value, row) => (row === 2 ? 0 : value))))).toEqual([
      ["term-missing", "row", 2, null, 1],
    ]);
    const u = [1.1, -0.7, 0.4];
    const v = [0.9, 2.2, -1.3, 0.5];
    const product = name(change(R, (value, row, column) => value - (u[row] ?? 0) * (v[column] ?? 0)));
    expect(brief(product)).toEqual([["term-missing", "block", null, null, 1]]);
    expect(product[0]?.detail).toContain("one product of a column and a row (rank 1)");
  });

  it("of a term too many stands where the reference is 0", () => {
    const sparse = change(R, (value, row, column) => ((row + column) % 2 === 0 ? value : 0));
    const found = name(
      change(sparse, (value, row, column) => (row === 0 && column === 1 ? 0.4 : value)),
      sparse,
    );
    expect(brief(found)).toEqual([["spurious-term", "entry", 0, 1, 1]]);
  });

  it("of single precision is told at a tolerance that sees it", () => {
    const found = name(
      change(R, (value) => Math.fround(value)),
      R,
      NAMES,
      1e-9,
    );
    expect(found.map(({ code }) => code)).toEqual(["single-precision"]);
    expect(
      name(
        change(R, (value) => value * (1 + 3e-8)),
        R,
        NAMES,
        1e-9,
      )[0]?.code,
    ).toBe("scaled");
  });

  it("of an inner solve that stops early is one absolute size over a line", () => {
    const wide: Matrix = [[120, 0.31, -8.25, 31, 0.044, -0.0071, 2.2, 0.9]];
    const off = [1, -1.2, 0.8, -0.9, 1.1, 1.3, -0.7, 0.95];
    const found = name(
      change(wide, (value, _, column) => value + 0.01 * (off[column] ?? 0)),
      wide,
    );
    expect(found.map(({ code, share }) => [code, share])).toEqual([["uneven-solve", 1]]);
    expect(found[0]?.detail).toContain("0.0098");
    expect(
      name(
        change(wide, (value, _, column) => value * (1 + 0.01 * (off[column] ?? 0))),
        wide,
      ),
    ).toEqual([]);
  });

  it("of what is not finite stands beside what the finite entries look like", () => {
    const found = name(change(R, (value, row, column) => (row === 0 ? NaN : column === 3 ? -value : value)));
    expect(brief(found)).toEqual([
      ["not-finite", "row", 0, null, 1],
      ["sign-flipped", "column", null, 3, 2 / 3],
    ]);
    expect(name(change(R, () => Infinity))[0]?.detail).toBe("The whole block is infinite.");
  });
});

describe("two mistakes in one block", () => {
  it("are both told, each of its place", () => {
    const both = name(change(R, (value, row, column) => (column === 0 ? -value : row === 1 ? value * 0.3048 : value)));
    expect(new Map(both.map(({ code, scope }) => [code, scope]))).toEqual(
      new Map([
        ["sign-flipped", "column"],
        ["unit-factor", "row"],
      ]),
    );
  });

  it("in two columns are told of both", () => {
    const both = name(change(R, (value, _, column) => (column === 0 ? -value : column === 2 ? 2 * value : value)));
    expect(brief(both).toSorted()).toEqual([
      ["scaled", "column", null, 2, 1],
      ["sign-flipped", "column", null, 0, 1],
    ]);
  });
});

describe("what fits equally well", () => {
  it("is told as an alternative", () => {
    const symmetric: Matrix = [
      [3.1, 0.7],
      [0.7, 3.1],
    ];
    const [found] = name(
      [
        [0.7, 3.1],
        [3.1, 0.7],
      ],
      symmetric,
    );
    expect([found?.detail, ...(found?.alternatives ?? [])].join(" ")).toMatch(/Rows .* swapped.*Columns .* swapped/);
  });
});

describe("shapes and numbers at the ends", () => {
  it.each([
    ["1 x 1", [[2.5]]],
    ["1 x n", [[2.5, -0.7, 11]]],
    ["n x 1", [[2.5], [-0.7], [11]]],
    [
      "huge",
      [
        [2.5e300, -7e299],
        [1.1e300, 9.2e299],
      ],
    ],
    [
      "small",
      [
        [2.5e-9, -7e-9],
        [1.1e-9, 9.2e-9],
      ],
    ],
  ] as [string, number[][]][])("%s: a flipped sign is named", (_, right) => {
    const found = name(
      change(right, (value) => -value),
      right,
    );
    expect(found.map(({ code, share }) => [code, share])).toEqual([["sign-flipped", 1]]);
  });

  it("subnormal numbers, infinities and empty blocks name nothing by accident", () => {
    expect(name([[5e-324, 2 ** -1060]], [[-5e-324, -(2 ** -1060)]])).toEqual([]);
    expect(name([], [])).toEqual([]);
    const found = name([[NaN, Number.MAX_VALUE]], [[1, -Number.MAX_VALUE]]);
    expect(found.map(({ code }) => code).toSorted()).toEqual(["not-finite", "sign-flipped"]);
  });

  it("of many single mistakes at most twenty are told", () => {
    const random = mulberry32(3);
    const right = Array.from({ length: 30 }, () => Array.from({ length: 30 }, () => random() - 0.5));
    const factors = [-1, 2, 0.5, 3, 1 / 3];
    const wrong = change(
      right,
      (value, row, column) => value * (factors[(7 * row + 11 * column + row * column) % 5] ?? 1),
    );
    const found = name(wrong, right);
    expect(found.length).toBeLessThanOrEqual(20);
    expect(found.length).toBeGreaterThan(0);
  });
});

describe("a derivative left behind", () => {
  const rows = 3;
  const columns = 4;
  const before = flat(R);
  const after = before.map((value, k) => (k % columns === 1 ? 1.2 * value : value));
  const judged = (derivative: Float64Array) => {
    const numbers = {
      ...block(R, [reference("complex-step", [{ step: 1e-20, values: after }])]),
      derivative,
    };
    const { resolution, floor, verdict } = judgeBlock(numbers, DEFAULT_TOLERANCES);
    return { derivative, reference: after, resolution, floor, verdict };
  };
  const told = (derivative: Float64Array) =>
    leftBehind(judged(derivative), { reference: before }, 1e-6, rows, columns, NAMES);

  it("is where the reference was", () => {
    expect(told(before)).toMatchObject({ code: "left-behind", scope: "column", column: 1, row: null, share: 1 });
    expect(told(before)?.detail).toBe(
      "Column 1 (x[1]) is where the reference was at the build before: the model moved and its derivative was left behind.",
    );
  });

  it("is not one that agrees, nor one that is wrong in another way", () => {
    expect(told(after)).toBeNull();
    expect(told(after.map((value) => -value))).toBeNull();
  });

  it("leaves out what was wrong before and did not move", () => {
    const wrong = before.map((value, k) => (k === 0 ? 3 * value : value));
    expect(told(wrong)).toMatchObject({ scope: "column", column: 1, share: 1 });
  });

  it("names the plane whose length is wrong", () => {
    expect(() => leftBehind(judged(before), { reference: before.subarray(1) }, 1e-6, rows, columns, NAMES)).toThrow(
      /before\.reference: 11 numbers, expected 12/,
    );
  });
});
