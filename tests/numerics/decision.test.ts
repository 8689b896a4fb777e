/**
 * The three-way decision rule: JCGM 106:2012 (reference/jcgm-106/examples.json); ISO 14253-1:2017, the guard band on
 * both sides of a limit is the expanded uncertainty. A quantity between limits is posed as a derivative of 1 plus its
 * distance from the middle, judged against a reference of 1.
 */
import { erf } from "mathjs";
import { describe, expect, it } from "vitest";
import type { Verdict } from "../../shared/domain/vocabulary.ts";
import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { block } from "./support/blocks.ts";
import { expectTable } from "./support/expectTable.ts";
import { readReference } from "./support/readReference.ts";
import { reference } from "./support/references.ts";

interface Example {
  readonly name: string;
  readonly y: number;
  /** Standard uncertainty. */
  readonly u: number;
  readonly lower?: number;
  readonly upper?: number;
  /** Probability that the quantity is within its limits. */
  readonly probability: number;
  readonly verdict: Verdict;
}

interface Examples {
  readonly examples: readonly Example[];
  /** A measured speed is prosecuted only where it is above the limit with the probability of `factor`. */
  readonly speed: Readonly<Record<"limit" | "relativeUncertainty" | "factor" | "permitted" | "prosecuted", number>>;
}

const { examples, speed } = readReference<Examples>("jcgm-106/examples.json");

/** Distribution function of the standard normal distribution. */
const phi = (z: number): number => (1 + erf(z / Math.SQRT2)) / 2;

/** Verdict on a distance from the middle of an interval of half width `tolerance`. */
function verdictOf(distance: number, expanded: number, tolerance: number): Verdict | undefined {
  const middle = reference("analytic", [{ step: null, values: Float64Array.of(1) }], { uncertainty: expanded });
  const judged = judgeBlock(block([[1 + distance]], [middle]), { rtol: tolerance, floorRel: 0, floorAbs: 0 });
  return VERDICTS[judged.verdict[0] ?? -1];
}

/** Middle and half width; an open side is a hundred uncertainties away. */
function intervalOf({ y, u, lower = y - 100 * u, upper = y + 100 * u }: Example): { middle: number; half: number } {
  return { middle: (lower + upper) / 2, half: (upper - lower) / 2 };
}

describe("the examples of JCGM 106", () => {
  it("have the printed probabilities of conformity", () => {
    const rows = examples.map(({ name, y, u, lower = -Infinity, upper = Infinity, probability }) => ({
      label: name,
      actual: phi((upper - y) / u) - phi((lower - y) / u),
      expected: probability,
      tolerance: 0.005,
    }));
    expectTable("probabilities of conformity", rows);
  });

  it.each(examples)("are decided with U = 2 u as guard band: $name", (example) => {
    const { middle, half } = intervalOf(example);
    expect(verdictOf(Math.abs(example.y - middle), 2 * example.u, half)).toBe(example.verdict);
  });

  it("prosecute at about 107 km/h where the limit is 100", () => {
    const at = (measured: number) => {
      const expanded = speed.factor * speed.relativeUncertainty * measured;
      return verdictOf(measured / speed.limit, expanded / speed.limit, 1);
    };
    expect(at(speed.permitted)).toBe("unresolved");
    expect(at(speed.prosecuted)).toBe("disagrees");
  });
});

describe("the guard band", () => {
  const TOLERANCE = 1;
  it.each([0, 0.1, 0.25, 0.5, 0.75, 0.99])("is U wide on both sides of the limit, U = %d", (expanded) => {
    const nudge = 1e-12;
    expect(verdictOf(TOLERANCE - expanded - nudge, expanded, TOLERANCE)).toBe("agrees");
    expect(verdictOf(TOLERANCE + expanded + nudge, expanded, TOLERANCE)).toBe("disagrees");
    if (expanded === 0) return;
    expect(verdictOf(TOLERANCE - expanded + nudge, expanded, TOLERANCE)).toBe("unresolved");
    expect(verdictOf(TOLERANCE + expanded - nudge, expanded, TOLERANCE)).toBe("unresolved");
  });

  it("leaves no zone of acceptance where U is above the tolerance, and does not turn it round", () => {
    for (const distance of [0, 0.25, 1, 2, 2.9]) expect(verdictOf(distance, 2, TOLERANCE)).toBe("unresolved");
    expect(verdictOf(3.1, 2, TOLERANCE)).toBe("disagrees");
  });

  it("keeps the risk of a wrong answer under 2.3 per cent with U = 2 u, wherever the quantity is", () => {
    const u = 0.1;
    for (let distance = 0; distance < 2; distance += 0.01) {
      const conforms = phi((TOLERANCE - distance) / u);
      const verdict = verdictOf(distance, 2 * u, TOLERANCE);
      if (verdict === "agrees") expect(1 - conforms).toBeLessThan(0.023);
      if (verdict === "disagrees") expect(conforms).toBeLessThan(0.023);
    }
  });
});
