import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { loadGate } from "../../server/features/gate/loadGate.ts";
import { policyOf } from "../../server/features/projects/settings.ts";
import type { Selector } from "../../shared/domain/selector.ts";
import type { GatePolicy } from "../../shared/domain/vocabulary.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import { blockOf, buildOf, commitOf, flipped, shaOf, TENSION, THRUST } from "../support/hull.ts";
import { openRecord } from "../support/record.ts";
import type { TestRecord } from "../support/record.ts";

type Block = BuildDocument["blocks"][number];

let record: TestRecord;
beforeEach(async () => {
  record = await openRecord();
});
afterEach(() => record.dispose());

const good = blockOf({ model: "rotor.thrust", derivative: THRUST, reference: THRUST });
const other = blockOf({ model: "mooring.tension", derivative: TENSION, reference: TENSION });
/** Off by a thousandth in one entry. */
const slightly = (row = 0, column = 0) =>
  blockOf({
    model: "rotor.thrust",
    derivative: THRUST.map((values, r) => values.map((v, c) => (r === row && c === column ? v * 1.001 : v))),
    reference: THRUST,
  });
const broken = blockOf({ model: "rotor.thrust", derivative: flipped(THRUST, [[0, 1]]), reference: THRUST });
const worse = blockOf({
  model: "rotor.thrust",
  derivative: flipped(THRUST, [
    [0, 1],
    [2, 0],
  ]),
  reference: THRUST,
});
const holed = blockOf({
  model: "rotor.thrust",
  derivative: THRUST.map((values, r) => (r === 1 ? ["NaN" as const, ...values.slice(1)] : values)),
  reference: THRUST,
});
const unreferenced: Block = { ...good, references: [] };
const coarse: Block = {
  ...good,
  references: (good.references ?? []).map((reference) => ({ ...reference, uncertainty: 10 })),
};

const post = async (n: number, blocks: Block[], wish: Parameters<typeof buildOf>[2] = {}) =>
  (await record.post(buildOf(commitOf(n), blocks, wish))).answer.gate;
const codes = (gate: { reasons: readonly { code: string; severity: string }[] }) =>
  gate.reasons.map(({ code, severity }) => `${code} ${severity}`);

async function ask(n: number, base: number | null = null, policy: Partial<GatePolicy> = {}, lane = "default") {
  const project = { id: record.project.id, policy: { ...policyOf(record.project), ...policy } };
  const question = { project, lane, commit: shaOf(n), base: base === null ? null : shaOf(base) };
  return loadGate(record.context.db, question, Date.now());
}

async function waive(selector: Selector, maxError: number, more: { state?: string; expiresAt?: number } = {}) {
  const { state = "approved", expiresAt = Date.now() + 60_000 } = more;
  await record.context.db.write((w) =>
    w.run(
      `INSERT INTO waivers (projectId, state, selector, reason, maxError, expiresAt, askedAt)
       VALUES ($1, $2, $3, 'known', $4, $5, 0)`,
      [record.project.id, state, JSON.stringify(selector), maxError, expiresAt],
    ),
  );
}

describe("the gate", () => {
  it("passes what is as it was, and knows nothing of what was not built", async () => {
    expect(await post(1, [good, other])).toMatchObject({ decision: "pass", base: null, reasons: [] });
    expect(await post(2, [good, other])).toMatchObject({ decision: "pass", base: shaOf(1), reasons: [] });
    const unknown = await ask(3);
    expect(unknown).toMatchObject({ decision: "unknown", buildId: null, base: null });
    expect(codes(unknown)).toEqual(["no-build warn"]);
    expect(codes(await ask(2, null, { "no-build": "fail" }, "other"))).toEqual(["no-build fail"]);
  });

  it("waits for shards, and answers by the last complete run meanwhile", async () => {
    const shard = { run: { id: "s" }, shard: { index: 0, count: 2 } };
    expect(await post(1, [good], shard)).toMatchObject({ decision: "wait", reasons: [] });
    expect(await ask(1)).toMatchObject({ decision: "wait" });
    await post(1, [good], { run: { id: "whole" } });
    expect(await ask(1)).toMatchObject({ decision: "pass" });
  });

  it("fails for a break that is new, names it, and only once", async () => {
    await post(1, [good, other]);
    const gate = await post(2, [broken, other]);
    expect(gate).toMatchObject({ decision: "fail", base: shaOf(1) });
    expect(gate.reasons).toEqual([
      expect.objectContaining({ code: "new-break", severity: "fail", model: "rotor.thrust", row: 0, column: 1 }),
    ]);
    const [row] = await record.context.db.select<{ id: number }>("SELECT id FROM breaks");
    expect(gate.reasons[0]?.breakId).toBe(String(row?.id));
    // The next commit did not make it; what it adds is new.
    expect(await post(3, [broken, other])).toMatchObject({ decision: "pass", base: shaOf(2), reasons: [] });
    expect((await post(4, [worse, other])).reasons).toEqual([
      expect.objectContaining({ code: "new-break", row: 2, column: 0 }),
    ]);
    expect(await post(5, [good, other])).toMatchObject({ decision: "pass", reasons: [] });
  });

  it("compares with the base that is asked for, or the newest judged ancestor on the default branch", async () => {
    await post(1, [good]);
    await record.post(buildOf(commitOf(10, [1], "topic"), [broken]));
    await record.post(buildOf(commitOf(11, [10], "topic"), [broken]));
    // The branch's own earlier build is no base: what the branch brings is new to the default branch.
    expect(await ask(11)).toMatchObject({ decision: "fail", base: shaOf(1) });
    expect(await ask(11, 10)).toMatchObject({ decision: "pass", base: shaOf(10) });
    await post(2, [broken]);
    expect(await ask(2, 10)).toMatchObject({ decision: "pass" });
    expect(await ask(2, 1)).toMatchObject({ decision: "fail" });
    // A base that was never built has nothing: everything is new.
    expect(await ask(2, 77)).toMatchObject({ decision: "fail", base: shaOf(77) });
  });

  it("fails for numbers that are not finite, and for blocks that vanished", async () => {
    await post(1, [good, other]);
    const gate = await post(2, [holed]);
    expect(gate.decision).toBe("fail");
    expect(codes(gate)).toEqual(["invalid-values fail", "block-missing fail"]);
    expect(gate.reasons[0]).toMatchObject({ row: 1, column: 0 });
    expect(gate.reasons[1]).toMatchObject({ model: "mooring.tension", block: "f by x" });
    expect(codes(await post(3, [holed]))).toEqual([]);
  });

  it("warns where a reference was lost, or tells less", async () => {
    await record.project.update({ checkLimit: 1 });
    await post(1, [good]);
    // What was checked a build ago still stands.
    expect(codes(await post(2, [unreferenced]))).toEqual([]);
    const lost = await post(3, [unreferenced]);
    expect(lost.decision).toBe("pass");
    expect(codes(lost)).toEqual(["reference-missing warn"]);
    expect(lost.reasons[0]?.message).toContain("6 entries");
    await post(4, [good]);
    expect(codes(await post(5, [coarse]))).toEqual(["resolution-lost warn"]);
    expect(codes(await post(6, [{ ...unreferenced, model: "new.block" }, coarse]))).toEqual(["reference-missing warn"]);
  });

  it("follows the project's policy", async () => {
    await record.project.update({ checkLimit: 1 });
    await post(1, [good, other]);
    await post(2, [broken]);
    const lenient = await ask(2, null, { "new-break": "warn", "block-missing": "warn" });
    expect(lenient.decision).toBe("pass");
    expect(codes(lenient)).toEqual(["new-break warn", "block-missing warn"]);
    await post(3, [unreferenced]);
    await post(4, [unreferenced]);
    expect(await ask(4)).toMatchObject({ decision: "pass" });
    expect(await ask(4, null, { "reference-missing": "fail" })).toMatchObject({ decision: "fail" });
    await record.project.update({ policy: JSON.stringify({ "reference-missing": "fail" }) });
    await post(5, [good]);
    expect(await post(6, [unreferenced])).toMatchObject({ decision: "pass" });
    expect(await post(7, [unreferenced])).toMatchObject({ decision: "fail" });
  });

  it("looks at a block that changed its shape as at a new one", async () => {
    await post(1, [broken]);
    const wide = blockOf({ model: "rotor.thrust", derivative: flipped(TENSION, [[0, 1]]), reference: TENSION });
    const tall: Block = { ...wide, output: { name: "f", size: 2 }, input: { name: "x", size: 2 } };
    expect(codes(await post(2, [tall]))).toEqual([]);
    const narrow = blockOf({ model: "rotor.thrust", derivative: [[-1], [1]], reference: [[1], [1]] });
    expect(codes(await post(3, [narrow]))).toEqual(["new-break fail"]);
  });
});

describe("a waiver", () => {
  beforeEach(async () => {
    await post(1, [good, other]);
  });

  it("lets an error up to its bound pass, and no larger one", async () => {
    await waive({ model: "rotor.*" }, 2e-3);
    expect(await post(2, [slightly(), other])).toMatchObject({ decision: "pass", reasons: [] });
    const gate = await post(3, [broken, other]);
    expect(gate.decision).toBe("fail");
    expect(codes(gate)).toEqual(["worse-than-waiver fail"]);
    // Beyond the bound at the base already: not new.
    expect(codes(await post(4, [broken, other]))).toEqual([]);
  });

  it("is found where an error grows beyond it, though it disagreed at the base", async () => {
    await waive({}, 2e-3);
    await post(2, [slightly(0, 1), other]);
    expect(codes(await post(3, [broken, other]))).toEqual(["worse-than-waiver fail"]);
  });

  it("covers what its globs, rows, columns and lane say", async () => {
    const covering: Selector[] = [
      { model: "rotor.thrust" },
      { model: "r*.?hrust", output: "f", input: "x", point: "nominal", lane: "def*" },
      { rows: [2, 0], columns: [0] },
    ];
    for (const selector of covering) {
      await record.context.db.write((w) => w.run("DELETE FROM waivers"));
      await waive(selector, 1e-2);
      await post(2, [slightly(), other], { run: { id: JSON.stringify(selector) } });
      expect(codes(await ask(2)), JSON.stringify(selector)).toEqual([]);
    }
    const elsewhere: Selector[] = [
      { model: "rotor" },
      { model: "rotorXthrust" },
      { output: "g" },
      { point: "stall" },
      { lane: "gcc" },
      { rows: [1] },
      { rows: [0], columns: [1] },
    ];
    for (const selector of elsewhere) {
      await record.context.db.write((w) => w.run("DELETE FROM waivers"));
      await waive(selector, 1e-2);
      expect(codes(await ask(2)), JSON.stringify(selector)).toEqual(["new-break fail"]);
    }
  });

  it("holds only while it is approved and not past its end", async () => {
    await post(2, [slightly(), other]);
    await waive({}, 1, { state: "asked" });
    await waive({}, 1, { state: "rejected" });
    await waive({}, 1, { state: "ended" });
    await waive({}, 1, { expiresAt: Date.now() - 1 });
    expect(codes(await ask(2))).toEqual(["new-break fail"]);
    await waive({}, 1e-9);
    expect(codes(await ask(2))).toEqual(["worse-than-waiver fail"]);
    // Of several the widest holds.
    await waive({ model: "rotor.thrust" }, 1e-2);
    expect(codes(await ask(2))).toEqual([]);
  });

  it("says nothing of numbers that are not finite", async () => {
    await waive({}, 1e9);
    expect(codes(await post(2, [holed, other]))).toEqual(["invalid-values fail"]);
  });
});
