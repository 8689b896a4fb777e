import { describe, expect, it } from "vitest";
import { VERDICT_CODE } from "../../shared/domain/vocabulary.ts";
import { cividis, cividisGradient } from "../../src/drawing/cividis.ts";
import { entryAt, matrixHeight, matrixWidth } from "../../src/drawing/drawMatrix.ts";
import { orderEntries } from "../../src/drawing/entryOrder.ts";
import { entryColour, magnitudeSpan, matrixPixels, rgbOf } from "../../src/drawing/matrixImage.ts";
import type { Palette } from "../../src/drawing/palette.ts";
import { decodePlanes, floatsOf } from "../../src/drawing/planes.ts";
import type { BlockPlanes } from "../../src/drawing/planes.ts";
import { blockFixture, floatPlane } from "./fixtures/blocks.ts";
import { stripFixture } from "./fixtures/history.ts";

const palette: Palette = {
  paper: "#f6f4ec",
  sheet: "#fffdf7",
  ink: "#1d2b3a",
  quiet: "#55616e",
  gridFine: "#e4dfcd",
  gridCoarse: "#cfc8ae",
  trace: "#1f4e79",
  reference: "#2b7bb0",
  verdicts: {
    agrees: "#00795a",
    disagrees: "#b34700",
    unresolved: "#8a5a00",
    unreferenced: "#55616e",
    invalid: "#93487a",
  },
};
const luminance = ([r, g, b]: readonly number[]) => 0.2126 * r! + 0.7152 * g! + 0.0722 * b!;

function planes(rows: number, columns: number, error: number[], rest: Partial<BlockPlanes> = {}): BlockPlanes {
  const size = rows * columns;
  return {
    rows,
    columns,
    derivative: new Float64Array(size).fill(1),
    reference: new Float64Array(size).fill(1),
    uncertainty: new Float64Array(size),
    error: Float64Array.from(error),
    verdict: new Uint8Array(size),
    motion: new Uint8Array(size),
    source: new Uint8Array(size),
    age: null,
    ...rest,
  };
}

describe("cividis", () => {
  it("runs from its dark blue to its yellow, ever lighter", () => {
    expect(cividis(0)).toEqual([0, 34, 78]);
    expect(cividis(1)).toEqual([253, 231, 55]);
    expect(cividis(-3)).toEqual(cividis(0));
    const steps = Array.from({ length: 101 }, (_, k) => luminance(cividis(k / 100)));
    for (let k = 1; k < steps.length; k += 1) expect(steps[k]!).toBeGreaterThanOrEqual(steps[k - 1]! - 1);
    expect(cividisGradient()).toContain("rgb(0 34 78)");
  });
});

describe("the matrix as pixels", () => {
  it("colours an error by its decade, one pixel an entry, row-major", () => {
    const { width, height, data } = matrixPixels(planes(2, 3, [1e-16, 1e-8, 1, 1e-16, 1e-8, 1]), "error", palette);
    expect([width, height]).toEqual([3, 2]);
    expect([...data.slice(0, 4)]).toEqual([...cividis(0), 255]);
    expect([...data.slice(4, 8)]).toEqual([...cividis(0.5), 255]);
    expect([...data.slice(8, 12)]).toEqual([...cividis(1), 255]);
  });
  it("leaves what is nothing transparent: no reference, and a structural zero", () => {
    const empty = planes(1, 2, [Number.NaN, 0], {
      derivative: Float64Array.of(1, 0),
      reference: Float64Array.of(Number.NaN, 0),
    });
    const { data } = matrixPixels(empty, "error", palette);
    expect([data[3], data[7]]).toEqual([0, 0]);
  });
  it("shows a value that is no number in the colour of invalid", () => {
    const bad = planes(1, 1, [Number.NaN], { verdict: Uint8Array.of(VERDICT_CODE.invalid) });
    expect(entryColour(bad, "error", palette)(0)).toEqual(rgbOf(palette.verdicts.invalid));
  });
  it("keeps the worst entry when it has to thin a large matrix", () => {
    const error = new Array<number>(100 * 100).fill(1e-12);
    error[57 * 100 + 31] = 1;
    const { width, data } = matrixPixels(planes(100, 100, error), "error", palette, 10);
    expect(width).toBe(10);
    expect([...data.slice(4 * (5 * 10 + 3), 4 * (5 * 10 + 3) + 3)]).toEqual(cividis(1));
  });
  it("spans the decades of values, sixteen at most, and survives a matrix of zeros", () => {
    expect(magnitudeSpan(Float64Array.of(0, -250, 0.002))).toEqual({ low: -3, high: 3 });
    expect(magnitudeSpan(Float64Array.of(1e-40, 10))).toEqual({ low: -15, high: 1 });
    expect(magnitudeSpan(Float64Array.of(0, 0))).toEqual({ low: -1, high: 0 });
  });
  it("finds the entry under a pixel and holds the edge", () => {
    const view = { rows: 4, columns: 8, width: 800, height: 400 };
    expect(entryAt(view, 450, 210)).toEqual({ row: 2, column: 4 });
    expect(entryAt(view, 900, -5)).toEqual({ row: 0, column: 7 });
    expect(matrixHeight(800, 40, 80)).toBe(400);
    expect(matrixHeight(matrixWidth(2), 3, 2)).toBe(144);
    expect(matrixHeight(800, 4000, 8)).toBe(560);
  });
});

describe("planes", () => {
  it("come back from base64 bit for bit", () => {
    const values = [1 / 3, -0, 5e-324, Number.NaN, Number.NEGATIVE_INFINITY];
    expect([...floatsOf(floatPlane(values))]).toEqual(values);
  });
  it("refuse a plane of the wrong length by name", () => {
    const block = blockFixture(stripFixture());
    expect(decodePlanes(block).error).toHaveLength(3600);
    expect(() => decodePlanes({ ...block, reference: floatPlane([1, 2]) })).toThrow(/reference has 2 entries/);
  });
  it("are listed worst first: the louder verdict, then the larger error", () => {
    const block = planes(1, 4, [1e-3, 1e-9, 1e-2, Number.NaN], {
      verdict: Uint8Array.of(
        VERDICT_CODE.disagrees,
        VERDICT_CODE.unresolved,
        VERDICT_CODE.disagrees,
        VERDICT_CODE.invalid,
      ),
    });
    expect([...orderEntries(block, "worst first")]).toEqual([3, 2, 0, 1]);
    expect([...orderEntries(block, "by row")]).toEqual([0, 1, 2, 3]);
  });
});
