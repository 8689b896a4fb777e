import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { VERDICTS, VERDICT_CODE } from "../../../shared/domain/vocabulary.ts";
import { partitionEntries } from "../../../shared/history/partitionEntries.ts";

const { agrees, disagrees, unresolved, unreferenced, invalid } = VERDICT_CODE;

/** The answers of one entry, straight from the definition. */
function answers(planes: readonly Uint8Array[], entry: number): ("good" | "bad" | null)[] {
  return planes.map((plane) => {
    const verdict = VERDICTS[plane[entry]!];
    if (verdict === "agrees") return "good";
    return verdict === "disagrees" || verdict === "invalid" ? "bad" : null;
  });
}

function plain(planes: readonly Uint8Array[]) {
  return partitionEntries(planes).map(({ entries, tests }) => ({ entries: [...entries], tests }));
}

describe("partitionEntries", () => {
  it("reads each verdict as the tracing does", () => {
    const planes = [Uint8Array.of(disagrees), ...VERDICTS.map((verdict) => Uint8Array.of(VERDICT_CODE[verdict]))];
    const expected = ["bad", "good", "bad", null, null, "bad"];
    expect(plain(planes)).toEqual([{ entries: [0], tests: expected }]);
  });

  it("leaves out entries that never were bad", () => {
    expect(plain([Uint8Array.of(agrees, unresolved, unreferenced)])).toEqual([]);
    expect(plain([])).toEqual([]);
    expect(plain([new Uint8Array(0)])).toEqual([]);
  });

  it("puts entries with the same history together, classes by their first entry", () => {
    const planes = [
      Uint8Array.of(agrees, agrees, disagrees, agrees, agrees, agrees),
      Uint8Array.of(agrees, disagrees, agrees, invalid, disagrees, agrees),
      Uint8Array.of(agrees, disagrees, unresolved, disagrees, agrees, unresolved),
    ];
    expect(plain(planes)).toEqual([
      { entries: [1, 3], tests: ["good", "bad", "bad"] },
      { entries: [2], tests: ["bad", "good", null] },
      { entries: [4], tests: ["good", "bad", "good"] },
    ]);
  });

  it("refuses planes of different length", () => {
    expect(() => partitionEntries([new Uint8Array(3), new Uint8Array(4)])).toThrow(RangeError);
  });

  it("does as the definition says, at any length and alignment", () => {
    const planes = fc.tuple(fc.nat(70), fc.integer({ min: 1, max: 6 }), fc.nat(3)).chain(([size, count, offset]) =>
      fc
        .array(fc.array(fc.nat(VERDICTS.length - 1), { minLength: size, maxLength: size }), {
          minLength: count,
          maxLength: count,
        })
        .map((lists) =>
          lists.map((codes) => Uint8Array.from([...new Array<number>(offset).fill(1), ...codes]).subarray(offset)),
        ),
    );
    fc.assert(
      fc.property(planes, (given) => {
        const expected = new Map<string, number[]>();
        for (let entry = 0; entry < given[0]!.length; entry++) {
          const told = answers(given, entry);
          if (!told.includes("bad")) continue;
          const key = JSON.stringify(told);
          expected.set(key, [...(expected.get(key) ?? []), entry]);
        }
        expect(plain(given)).toEqual([...expected].map(([key, entries]) => ({ entries, tests: JSON.parse(key) })));
      }),
    );
  });

  it("finds few bad entries among a million in twenty planes in a moment", () => {
    const planes = Array.from({ length: 20 }, () => new Uint8Array(1_000_003));
    planes[7]![999_999] = disagrees;
    planes[8]![1_000_002] = invalid;
    const started = performance.now();
    expect(plain(planes).map(({ entries }) => entries)).toEqual([[999_999], [1_000_002]]);
    expect(performance.now() - started).toBeLessThan(2_000);
  });
});
