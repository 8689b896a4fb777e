/** The dictionary of units against NIST SP 811, appendix B.8, and how a factor is read by it. */
import { describe, expect, it } from "vitest";
import { DIMENSIONS, unitOf } from "../../shared/domain/units.ts";
import { inWords } from "../../shared/numerics/signatures/words.ts";
import { plainRatio } from "../../shared/numerics/signatures/plainRatio.ts";
import { UNIT_PAIRS } from "../../shared/numerics/signatures/unitPairs.ts";
import { piText, plainReadings, unitReadings } from "../../shared/numerics/signatures/unitWords.ts";
import { expectTable } from "./support/expectTable.ts";
import { readReference } from "./support/readReference.ts";
import { NAMES } from "./support/signatures/faultTrials.ts";

interface Published {
  readonly units: readonly {
    readonly unit: string;
    readonly base: string;
    readonly decimal: string;
    readonly sp811: string;
  }[];
}
const { units } = readReference<Published>("nist-sp811/units.json");

const factorOf = (symbol: string): number => unitOf(symbol)?.unit.factor ?? NaN;

/** Half a unit of the last digit of a decimal number. */
function halfDigit(text: string): number {
  const digits = /^-?\d*\.?(\d*)/.exec(text)?.[1]?.length ?? 0;
  return 0.5 * 10 ** -digits * (1 + 1e-9);
}

describe("the dictionary of units", () => {
  it("has the exact factors, rounded once", () => {
    expectTable(
      "NIST SP 811 B.8, exact",
      units.map(({ unit, base, decimal }) => ({
        label: `${unit} in ${base}`,
        actual: factorOf(unit) / factorOf(base),
        expected: Number(decimal),
        tolerance: 2 ** -52 * Number(decimal),
      })),
    );
  });

  it("rounds to the seven digits that SP 811 prints", () => {
    expectTable(
      "NIST SP 811 B.8, printed",
      units.map(({ unit, base, sp811 }) => ({
        label: `${unit} in ${base}`,
        actual: factorOf(unit) / factorOf(base),
        expected: Number(sp811),
        tolerance: Math.max(halfDigit(sp811), 2 ** -52 * Number(sp811)),
      })),
    );
  });

  it("has every symbol once, and a base unit of factor 1 first", () => {
    const symbols = DIMENSIONS.flatMap((dimension) => dimension.units.flatMap((one) => one.symbols));
    expect(new Set(symbols).size).toBe(symbols.length);
    expect(DIMENSIONS.map((dimension) => dimension.units[0]?.factor)).toEqual(DIMENSIONS.map(() => 1));
    expect(unitOf(" deg ")?.unit.name).toBe("degrees");
    expect(unitOf("kn")?.dimension).toBe("speed");
    expect(unitOf("kN")?.dimension).toBe("force");
    expect(unitOf("furlong")).toBeNull();
    expect(unitOf(null)).toBeNull();
  });

  it("has every ratio with its inverse", () => {
    for (const { first, second, ratio, power } of UNIT_PAIRS) {
      const inverse = UNIT_PAIRS.find((pair) => pair.first === second && pair.second === first && pair.power === power);
      expect(ratio * (inverse?.ratio ?? NaN)).toBeCloseTo(1, 12);
    }
  });
});

describe("a factor", () => {
  const words = (factor: number, tolerance = 1e-6, names = NAMES) =>
    unitReadings(factor, tolerance, names).map((reading) => reading.words);

  it.each([
    [Math.PI / 180, "degrees where radians are meant"],
    [180 / Math.PI, "radians where degrees are meant"],
    [(Math.PI / 180) ** 2, "degrees where radians are meant, squared"],
    [25.4, "inches where millimetres are meant"],
    [6.894757293168362, "pounds-force per square inch where kilopascals are meant"],
    [1 / 0.3048, "metres where feet are meant"],
    [2 * Math.PI, "revolutions where radians are meant"],
    [1.8, "kelvins where degrees Fahrenheit are meant"],
    [3600, "hours where seconds are meant"],
  ])("of %d is read as %s", (factor, reading) => {
    expect(words(factor)).toContain(reading);
  });

  it("tells both where two pairs have the same ratio", () => {
    expect(words(9.80665)).toEqual(
      expect.arrayContaining([
        "kilograms-force where newtons are meant",
        "standard gravities where metres per second squared are meant",
      ]),
    );
    expect(words(1 / 60).length).toBeGreaterThan(1);
  });

  it("tells pairs apart that are 0.07 % apart, and atmospheres from bars", () => {
    expect(words(4.184, 1e-4)).toEqual(["thermochemical calories where joules are meant"]);
    expect(words(4.1868, 1e-4)).toEqual(["IT calories where joules are meant"]);
    expect(words(101_325, 1e-4)).toEqual(["atmospheres where pascals are meant"]);
  });

  it("is read by the posted units first, and a plain one only by them", () => {
    const input = (unit: string) => ({ output: NAMES.output, input: { name: "chord", unit, elements: null } });
    expect(words(1000)).toEqual([]);
    expect(words(1e-3, 1e-6, input("m"))[0]).toBe("millimetres where chord is posted in m");
    expect(words(0.0254, 1e-6, input("m"))[0]).toBe("inches where chord is posted in m");
    const output = { output: { name: "thrust", unit: "N", elements: null }, input: NAMES.input };
    expect(words(1e-3, 1e-6, output)[0]).toBe("kilonewtons where thrust is posted in N");
    expect(words(1 / 4.4482216152605, 1e-6, output)[0]).toBe("pounds-force where thrust is posted in N");
    expect(plainReadings(1000, 1e-6).map((reading) => reading.words)).toContain("kilometres where metres are meant");
  });

  it("is no unit's a ten-thousandth beside it", () => {
    for (const { ratio } of UNIT_PAIRS.filter((pair) => pair.usual && pair.dimension === "angle")) {
      expect(words(ratio * 1.0003, 1e-4)).toEqual([]);
    }
  });

  it("is written as a plain ratio where it is one", () => {
    expect([2, 0.5, 2 / 3, 0.75, 10, 1e-6, 1000].map((factor) => plainRatio(factor, 1e-9))).toEqual([
      "2",
      "1/2",
      "2/3",
      "3/4",
      "10",
      "10⁻⁶",
      "10³",
    ]);
    expect([1, 1.8, 7 / 9, 1001, 0, Infinity, NaN].map((factor) => plainRatio(factor, 1e-9))).toEqual(
      new Array<null>(7).fill(null),
    );
  });

  it("is written with six digits and no trailing zeros, whole numbers whole", () => {
    expect([57.29577951, 0.5, 360_000, 100, 1.5e9, 2.5e-8].map(inWords)).toEqual([
      "57.2958",
      "0.5",
      "360000",
      "100",
      "1.5 × 10⁹",
      "2.5 × 10⁻⁸",
    ]);
  });

  it("is written with pi where it has one", () => {
    expect([Math.PI / 180, 180 / Math.PI, Math.PI / 30, 2 * Math.PI, (Math.PI / 180) ** 2, 0.3048].map(piText)).toEqual(
      ["π/180", "180/π", "π/30", "2π", "(π/180)^2", null],
    );
  });
});
