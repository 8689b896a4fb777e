import { describe, expect, it } from "vitest";
import { DEFAULT_GATE_POLICY } from "../../../shared/domain/vocabulary.ts";
import { decideGate } from "../../../shared/history/decideGate.ts";
import type { GateBlock, GateEntry } from "../../../shared/history/types.ts";

const BASE = "a".repeat(40);
const counts = { unreferenced: 0, unresolved: 0, entries: 6 };
const jacobian = (block = "f by x", more: Partial<GateBlock> = {}): GateBlock => ({
  blockId: block,
  model: "rotor",
  block,
  ...counts,
  ...more,
});
const probe = (label: string, block = "f by x", more: Partial<GateBlock> = {}): GateBlock => ({
  ...jacobian(block),
  blockId: `${block} ${label}`,
  entries: 1,
  probe: { name: `taylor: ${label}`, sentence: `${label} is off` },
  ...more,
});
const bad = (block: GateBlock, more: Partial<GateEntry> = {}): GateEntry => ({
  blockId: block.blockId,
  row: 0,
  column: 0,
  verdict: "disagrees",
  error: 0.5,
  badAtBase: false,
  breakId: "7",
  waivedUpTo: null,
  ...more,
});
const told = (head: GateBlock[], baseBlocks: GateBlock[], entries: GateEntry[] = []) =>
  decideGate({
    lane: "default",
    commit: "b".repeat(40),
    base: BASE,
    state: "complete",
    head,
    baseBlocks,
    bad: entries,
    rises: [],
    policy: DEFAULT_GATE_POLICY,
  }).reasons.map(({ code, message }) => `${code}: ${message}`);
const since = "aaaaaaaaaaaa";

describe("probes at the gate", () => {
  it("are found one by one, even of one break, and apart from its partials", () => {
    const [a, b] = [probe("a"), probe("b")];
    const found = told([jacobian(), a, b], [], [bad(a), bad(b), bad(jacobian())]);
    expect(found).toHaveLength(3);
    expect(found.filter((reason) => reason.startsWith("probe-failed: "))).toEqual([
      `probe-failed: probe taylor: a of rotor, f by x failed and did not at ${since}: a is off`,
      `probe-failed: probe taylor: b of rotor, f by x failed and did not at ${since}: b is off`,
    ]);
  });

  it("that were bad at the base are not new, and what is no number failed", () => {
    const a = probe("a");
    expect(told([a], [], [bad(a, { badAtBase: true })])).toEqual([]);
    expect(told([a], [], [bad(a, { verdict: "invalid", error: NaN })])[0]).toMatch(/^probe-failed: /);
  });

  it("may be other ones in each build", () => {
    expect(told([jacobian(), probe("b")], [jacobian(), probe("a")])).toEqual([]);
  });

  it("are missed once where all of a block are gone", () => {
    const one = told([jacobian()], [jacobian(), probe("a")]);
    expect(one).toEqual([`reference-missing: probe taylor: a of rotor, f by x is missing since ${since}`]);
    const two = told([jacobian()], [jacobian(), probe("a"), probe("b")]);
    expect(two).toEqual([`reference-missing: all 2 probes of rotor, f by x are missing since ${since}`]);
  });

  it("are not missed where their Jacobian is, or came to be posted instead", () => {
    expect(told([], [jacobian(), probe("a")])).toEqual([
      `block-missing: rotor, f by x was posted at ${since} and is missing here`,
    ]);
    expect(told([jacobian()], [probe("a")])).toEqual([
      `reference-missing: probe taylor: a of rotor, f by x is missing since ${since}`,
    ]);
  });

  it("that are all of a block are missing as that block, once for each", () => {
    expect(told([], [probe("a"), probe("b"), probe("a", "g by x")]).sort()).toEqual([
      `block-missing: rotor, f by x was probed at ${since} and is missing here`,
      `block-missing: rotor, g by x was probed at ${since} and is missing here`,
    ]);
  });

  it("never lose a reference or resolution of their own", () => {
    const coarse = probe("a", "f by x", { unresolved: 1, unreferenced: 1 });
    expect(told([jacobian(), coarse], [jacobian(), probe("a")])).toEqual([]);
    expect(told([jacobian(), coarse], [jacobian()])).toEqual([]);
  });
});
