import { describe, expect, it } from "vitest";
import { DEFAULT_GATE_POLICY } from "../../../shared/domain/vocabulary.ts";
import { decideGate } from "../../../shared/history/decideGate.ts";
import type { GateBlock, GateEntry, GateInput } from "../../../shared/history/types.ts";
import { mulberry32, shuffled } from "../../support/random.ts";

const base = "b".repeat(40);
const shortBase = "b".repeat(12);

function block(blockId: string, more: Partial<GateBlock> = {}): GateBlock {
  return { blockId, model: "rotor.thrust", block: blockId, unreferenced: 0, unresolved: 0, entries: 12, ...more };
}

function entry(more: Partial<GateEntry> = {}): GateEntry {
  return {
    blockId: "thrust/pitch",
    row: 0,
    column: 1,
    verdict: "disagrees",
    error: 0.25,
    badAtBase: false,
    breakId: null,
    waivedUpTo: null,
    ...more,
  };
}

function gate(more: Partial<GateInput> = {}) {
  return decideGate({
    lane: "gcc",
    commit: "c".repeat(40),
    base,
    state: "complete",
    head: [block("thrust/pitch")],
    baseBlocks: [block("thrust/pitch")],
    bad: [],
    rises: [],
    policy: DEFAULT_GATE_POLICY,
    ...more,
  });
}

/** Codes with their severities. */
function codes(more: Partial<GateInput>) {
  return gate(more).reasons.map(({ code, severity }) => `${code} ${severity}`);
}

describe("decisions", () => {
  it("pass where nothing is new", () => {
    expect(gate()).toEqual({ decision: "pass", reasons: [] });
    expect(gate({ bad: [entry({ badAtBase: true })] })).toEqual({ decision: "pass", reasons: [] });
  });

  it("wait while shards are missing, whatever is known already", () => {
    expect(gate({ state: "receiving", bad: [entry()] })).toEqual({ decision: "wait", reasons: [] });
  });

  it("are unknown without a build, whatever the policy", () => {
    const message = `there is no build of ${"c".repeat(12)} in lane gcc`;
    expect(gate({ state: null })).toEqual({
      decision: "unknown",
      reasons: [{ code: "no-build", severity: "warn", message }],
    });
    const strict = gate({ state: null, policy: { ...DEFAULT_GATE_POLICY, "no-build": "fail" } });
    expect(strict).toEqual({ decision: "unknown", reasons: [{ code: "no-build", severity: "fail", message }] });
  });

  it("follow the project's policy", () => {
    const lenient = { ...DEFAULT_GATE_POLICY, "new-break": "warn" } as const;
    expect(gate({ bad: [entry()] }).decision).toBe("fail");
    expect(gate({ bad: [entry()], policy: lenient })).toMatchObject({
      decision: "pass",
      reasons: [{ severity: "warn" }],
    });
  });
});

describe("entries", () => {
  it("that are newly bad are a new break, told with the worst of them", () => {
    const bad = [entry({ error: 1e-3 }), entry({ row: 2, column: 3, error: 0.5 }), entry({ row: 4, error: 0.1 })];
    expect(gate({ bad }).reasons).toEqual([
      {
        code: "new-break",
        severity: "fail",
        message: `3 entries of rotor.thrust, thrust/pitch disagree with their reference and were not so at ${shortBase} (worst: row 2, column 3, relative error 0.50)`,
        model: "rotor.thrust",
        block: "thrust/pitch",
        row: 2,
        column: 3,
      },
    ]);
    expect(gate({ bad: [entry()] }).reasons[0]!.message).toBe(
      `one entry of rotor.thrust, thrust/pitch disagrees with its reference and was not so at ${shortBase} (row 0, column 1, relative error 0.25)`,
    );
  });

  it("of one break are one reason over all its blocks", () => {
    const head = [block("thrust/pitch"), block("thrust/speed")];
    const bad = [
      entry({ breakId: "k1" }),
      entry({ breakId: "k1", blockId: "thrust/speed", error: 2 }),
      entry({ breakId: "k2", row: 5 }),
    ];
    const { reasons } = gate({ head, bad });
    expect(reasons).toMatchObject([
      { breakId: "k1", block: "thrust/speed", row: 0 },
      { breakId: "k2", block: "thrust/pitch", row: 5 },
    ]);
    expect(reasons[0]!.message).toMatch(/^2 entries in 2 blocks, among them rotor\.thrust, thrust\/speed, disagree/);
  });

  it("without a base are new, and the message names none", () => {
    const { decision, reasons } = gate({ base: null, baseBlocks: [], bad: [entry()] });
    expect(decision).toBe("fail");
    expect(reasons[0]!.message).not.toMatch(/were not so/);
  });

  it("that are not finite have a reason of their own, waived or not", () => {
    const invalid = entry({ verdict: "invalid", error: NaN, waivedUpTo: 1 });
    expect(codes({ bad: [invalid, entry()] })).toEqual(["invalid-values fail", "new-break fail"]);
    expect(gate({ bad: [invalid] }).reasons[0]!.message).toBe(
      `one entry of rotor.thrust, thrust/pitch is no finite number and was not so at ${shortBase} (row 0, column 1)`,
    );
    expect(codes({ bad: [{ ...invalid, badAtBase: true }] })).toEqual([]);
  });

  it.each([
    ["within the bound", { error: 0.1, waivedUpTo: 0.1 }, []],
    ["within the bound, bad at the base", { error: 0.05, waivedUpTo: 0.1, badAtBase: true }, []],
    ["beyond the bound", { error: 0.2, waivedUpTo: 0.1 }, ["worse-than-waiver fail"]],
    ["beyond the bound, bad at the base", { error: 0.2, waivedUpTo: 0.1, badAtBase: true }, ["worse-than-waiver fail"]],
    [
      "beyond it only here",
      { error: 0.2, waivedUpTo: 0.1, badAtBase: true, errorAtBase: 0.09 },
      ["worse-than-waiver fail"],
    ],
    ["beyond it at the base already", { error: 0.2, waivedUpTo: 0.1, badAtBase: true, errorAtBase: 0.2 }, []],
    ["with an infinite error", { error: Infinity, waivedUpTo: 1e300 }, ["worse-than-waiver fail"]],
    ["with an error that is no number", { error: NaN, waivedUpTo: 0.1 }, ["worse-than-waiver fail"]],
  ])("that are waived: %s", (_, more, expected) => {
    expect(codes({ bad: [entry(more)] })).toEqual(expected);
  });

  it("beyond a waiver are told with its bound", () => {
    expect(gate({ bad: [entry({ error: 0.2, waivedUpTo: 0.1 })] }).reasons[0]!.message).toBe(
      "one entry of rotor.thrust, thrust/pitch is worse than its waiver allows (row 0, column 1, relative error 0.20, waived up to 0.10)",
    );
  });
});

describe("blocks", () => {
  it("that vanished are missing", () => {
    expect(gate({ head: [] }).reasons).toEqual([
      {
        code: "block-missing",
        severity: "fail",
        message: `rotor.thrust, thrust/pitch was posted at ${shortBase} and is missing here`,
        model: "rotor.thrust",
        block: "thrust/pitch",
      },
    ]);
  });

  it("that are new are no news, unless they have no reference at all", () => {
    expect(codes({ head: [block("thrust/pitch"), block("new", { unreferenced: 11 })] })).toEqual([]);
    const { decision, reasons } = gate({ head: [block("thrust/pitch"), block("new", { unreferenced: 12 })] });
    expect(decision).toBe("pass");
    expect(reasons).toMatchObject([{ code: "reference-missing", severity: "warn", block: "new" }]);
    expect(reasons[0]!.message).toBe("rotor.thrust, new is new and has no reference");
    expect(codes({ head: [block("thrust/pitch"), block("empty", { entries: 0 })] })).toEqual([]);
  });

  it("that lost references say how many", () => {
    const { reasons } = gate({
      head: [block("thrust/pitch", { unreferenced: 5 })],
      baseBlocks: [block("thrust/pitch", { unreferenced: 2 })],
    });
    expect(reasons).toMatchObject([{ code: "reference-missing", severity: "warn" }]);
    expect(reasons[0]!.message).toBe(
      `3 entries of rotor.thrust, thrust/pitch lost their reference since ${shortBase} (5 of 12 have none)`,
    );
    const never = block("thrust/pitch", { unreferenced: 12 });
    expect(codes({ head: [never], baseBlocks: [never] })).toEqual([]);
  });

  it("that lost resolution say how many", () => {
    const { reasons } = gate({ head: [block("thrust/pitch", { unresolved: 1 })] });
    expect(reasons).toMatchObject([{ code: "resolution-lost", severity: "warn" }]);
    expect(reasons[0]!.message).toBe(
      `one more entry of rotor.thrust, thrust/pitch is unresolved than at ${shortBase} (1 of 12)`,
    );
    expect(codes({ baseBlocks: [block("thrust/pitch", { unresolved: 1 })] })).toEqual([]);
  });
});

describe("reasons", () => {
  const head = [block("a", { unresolved: 2 }), block("b", { unreferenced: 1 }), block("c"), block("d")];
  const baseBlocks = [block("a"), block("b"), block("gone"), block("c"), block("d")];
  const bad = [
    entry({ blockId: "c", error: 0.5 }),
    entry({ blockId: "d", error: 5 }),
    entry({ blockId: "a", waivedUpTo: 0.1 }),
    entry({ blockId: "b", verdict: "invalid", error: NaN }),
  ];

  it("come worst first", () => {
    const { reasons } = gate({ head, baseBlocks, bad });
    expect(reasons.map(({ code, block: name }) => `${code} ${name}`)).toEqual([
      "invalid-values b",
      "new-break d",
      "new-break c",
      "worse-than-waiver a",
      "block-missing gone",
      "reference-missing b",
      "resolution-lost a",
    ]);
    const turned = { ...DEFAULT_GATE_POLICY, "invalid-values": "warn", "resolution-lost": "fail" } as const;
    expect(codes({ head, baseBlocks, bad, policy: turned })).toEqual([
      "new-break fail",
      "new-break fail",
      "worse-than-waiver fail",
      "block-missing fail",
      "resolution-lost fail",
      "invalid-values warn",
      "reference-missing warn",
    ]);
  });

  it("do not depend on the order of the input", () => {
    const expected = gate({ head, baseBlocks, bad });
    for (let seed = 0; seed < 20; seed++) {
      const mix = <T>(items: readonly T[]) => shuffled(mulberry32(seed), items);
      expect(gate({ head: mix(head), baseBlocks: mix(baseBlocks), bad: mix(bad) })).toEqual(expected);
    }
  });

  it("are at most a hundred, the last of which counts the rest", () => {
    const many = Array.from({ length: 250 }, (_, at) => block(`b${at}`));
    const { decision, reasons } = gate({ head: [], baseBlocks: many });
    expect(decision).toBe("fail");
    expect(reasons).toHaveLength(100);
    expect(reasons[99]).toEqual({
      code: "block-missing",
      severity: "fail",
      message: "and 151 more findings, shown on the page of the build",
    });
  });
});
