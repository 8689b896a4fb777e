import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { csvLine } from "../../../server/features/exports/csv.ts";
import { parseCsv } from "./parseCsv.ts";

const cellOf = (cell: string | number | boolean | null) => parseCsv(csvLine([cell, "end"]))[0][0];

describe("csvLine", () => {
  it("is a line of RFC 4180: its examples of quoting", () => {
    expect(csvLine(["aaa", "b\r\nbb", "ccc"])).toBe('aaa,"b\r\nbb",ccc\r\n');
    expect(csvLine(["aaa", 'b"bb', "ccc"])).toBe('aaa,"b""bb",ccc\r\n');
    expect(csvLine(["", null, "a,b"])).toBe(',,"a,b"\r\n');
  });

  it.each([
    [0.1, "0.1"],
    [-1.5e-7, "-1.5e-7"],
    [-0, "-0"],
    [5e-324, "5e-324"],
    [1.7976931348623157e308, "1.7976931348623157e+308"],
    [NaN, "NaN"],
    [Infinity, "Infinity"],
    [-Infinity, "-Infinity"],
    [true, "true"],
  ])("writes %s as %s", (cell, text) => {
    expect(cellOf(cell)).toBe(text);
  });

  it("keeps every bit of every number", () => {
    fc.assert(fc.property(fc.double(), (value) => Object.is(Number(cellOf(value)), value)));
  });

  it.each(["=1+2", "+cmd|' /C calc'!A0", "-2+3", "@SUM(A1)", "\t=1", "\r=1", "＝1+2", "-x", "+", "=", "\n=1", "\0=1"])(
    "puts an apostrophe before the text %j",
    (text) => {
      expect(cellOf(text)).toBe(`'${text}`);
    },
  );

  it.each(["-5", "+1.5e-3", "-.5", "- 5 apples".slice(2), "rotor.thrust", "a=b", "'quoted"])(
    "leaves the text %j",
    (text) => {
      expect(cellOf(text)).toBe(text);
    },
  );

  it("reads back whatever texts there are, but for that apostrophe", () => {
    fc.assert(
      fc.property(fc.array(fc.string({ unit: "binary" }), { minLength: 2 }), (texts) => {
        const read = parseCsv(csvLine(texts));
        expect(read).toHaveLength(1);
        expect(read[0].map((text, at) => (text === `'${texts[at]}` ? text.slice(1) : text))).toEqual(texts);
      }),
    );
  });
});

describe("the reader that the tests use", () => {
  it.each(['a"b\r\n', '"a"b\r\n', "a\nb\r\n", "a,b", '"a\r\n'])("refuses %j", (text) => {
    expect(() => parseCsv(text)).toThrow();
  });
});
