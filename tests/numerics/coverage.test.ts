import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { MOTION_CODE, VERDICT_CODE, VERDICTS } from "../../shared/domain/vocabulary.ts";
import { carryVerdicts, NEVER_CHECKED } from "../../shared/numerics/coverage/carryVerdicts.ts";
import type { VerdictsBefore } from "../../shared/numerics/coverage/carryVerdicts.ts";

const { agrees, disagrees, unresolved, unreferenced } = VERDICT_CODE;
const still = (entries: number) => new Uint8Array(entries).fill(MOTION_CODE.still);

describe("verdicts of a build that checked some entries only", () => {
  it("keep what was found before while nothing moved, one build older", () => {
    const before = { verdict: Uint8Array.of(agrees, disagrees, agrees), age: Uint8Array.of(0, 3, 0) };
    const now = Uint8Array.of(unreferenced, unreferenced, disagrees);
    expect(carryVerdicts(now, still(3), before, 20)).toEqual({
      verdict: Uint8Array.of(agrees, disagrees, disagrees),
      age: Uint8Array.of(1, 4, 0),
      counts: { entries: 3, agrees: 1, disagrees: 2, unresolved: 0, unreferenced: 0, invalid: 0 },
      carried: 2,
      oldest: 4,
    });
  });

  it("are unreferenced once the limit has passed, and never earlier", () => {
    let told = carryVerdicts(Uint8Array.of(agrees), null, null, 3);
    const verdicts = [told.verdict[0]];
    for (let build = 0; build < 5; build += 1) {
      told = carryVerdicts(Uint8Array.of(unreferenced), still(1), told, 3);
      verdicts.push(told.verdict[0]);
    }
    expect(verdicts).toEqual([agrees, agrees, agrees, agrees, unreferenced, unreferenced]);
    expect(told.age[0]).toBe(NEVER_CHECKED);
  });

  it.each(["together", "derivative-only", "model-only", "apart"] as const)(
    "cannot tell any more after the entry moved: %s",
    (motion) => {
      const before = { verdict: Uint8Array.of(agrees, disagrees), age: null };
      const moved = new Uint8Array(2).fill(MOTION_CODE[motion]);
      const told = carryVerdicts(new Uint8Array(2).fill(unreferenced), moved, before, 20);
      expect([...told.verdict]).toEqual([unresolved, unresolved]);
      expect([...told.age]).toEqual([1, 1]);
    },
  );

  it("without a build before are its own", () => {
    const told = carryVerdicts(Uint8Array.of(agrees, unreferenced), null, null, 20);
    expect([...told.verdict]).toEqual([agrees, unreferenced]);
    expect([...told.age]).toEqual([0, NEVER_CHECKED]);
    expect(told.carried).toBe(0);
  });

  it("of an empty block are none", () => {
    expect(carryVerdicts(new Uint8Array(0), still(0), null, 20).counts.entries).toBe(0);
  });

  it("refuse arrays of another length, by name", () => {
    const before = { verdict: new Uint8Array(2), age: null };
    expect(() => carryVerdicts(new Uint8Array(3), still(2), null, 20)).toThrow(/motion: 2/);
    expect(() => carryVerdicts(new Uint8Array(3), null, before, 20)).toThrow(/before\.verdict: 2/);
    expect(() => carryVerdicts(new Uint8Array(2), null, { ...before, age: new Uint8Array(1) }, 20)).toThrow(
      /before\.age/,
    );
  });

  it("never replace what the build found itself, and never outlive the limit", () => {
    const code = fc.integer({ min: 0, max: VERDICTS.length - 1 });
    const builds = fc.array(fc.array(code, { minLength: 4, maxLength: 4 }), { minLength: 1, maxLength: 12 });
    fc.assert(
      fc.property(builds, fc.integer({ min: 1, max: 5 }), (codes, limit) => {
        let before: VerdictsBefore | null = null;
        const sinceChecked = [Infinity, Infinity, Infinity, Infinity];
        for (const build of codes) {
          const told = carryVerdicts(Uint8Array.from(build), still(4), before, limit);
          build.forEach((own, k) => {
            sinceChecked[k] = own === unreferenced ? (sinceChecked[k] as number) + 1 : 0;
            if (own !== unreferenced) expect(told.verdict[k]).toBe(own);
            const within = (sinceChecked[k] as number) <= limit;
            expect(told.age[k]).toBe(within ? sinceChecked[k] : NEVER_CHECKED);
            expect(told.verdict[k] === unreferenced).toBe(!within);
          });
          before = told;
        }
      }),
    );
  });
});
