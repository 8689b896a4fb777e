import { describe, expect, it } from "vitest";
import { paint, sumInWords, verdictLines } from "../../../scripts/report/print.ts";
import { CAUTION } from "../../../shared/domain/vocabulary.ts";
import { posted, SHA } from "./support/fakeServer.ts";

const onset = "b".repeat(40);
const told = {
  project: "hull",
  dryRun: false,
  known: [
    { sha: SHA, subject: "Trim the keel" },
    { sha: onset, subject: "Turn the table" },
  ],
};

describe("the verdict in words", () => {
  it("counts, singular and plural", () => {
    const { summary } = posted({});
    expect(sumInWords(summary)).toBe("2 blocks, 12 entries: 11 agree, 1 unresolved");
    const probes = { agrees: 2, disagrees: 1, unresolved: 1, invalid: 0 };
    expect(sumInWords({ ...summary, probes })).toBe(
      "2 blocks, 12 entries: 11 agree, 1 unresolved; 4 probes: 2 agree, 1 disagrees, 1 unresolved",
    );
    expect(
      sumInWords({ ...summary, blocks: 1, entries: 1, agrees: 1, disagrees: 1, invalid: 2, unreferenced: 3000 }),
    ).toBe("1 block, 1 entry: 1 agrees, 1 disagrees, 2 invalid, 1 unresolved, 3,000 unreferenced");
  });

  it("names the commit, each break with its onset, each reason, and ends with the address and the caution", () => {
    const answer = posted({
      breaks: [
        { id: "3", url: "http://c.example/breaks/3", state: "open", onset },
        { id: "2", url: "http://c.example/breaks/2", state: "repaired", onset },
      ],
      gate: {
        decision: "fail",
        base: onset,
        reasons: [
          { code: "new-break", severity: "fail", message: "3 entries of keel.lift disagree" },
          { code: "resolution-lost", severity: "warn", message: "the reference of keel.drag is coarser" },
        ],
      },
    });
    expect(verdictLines(answer, told, paint(false))).toEqual([
      'hull, lane gcc, commit aaaaaaaaaaaa "Trim the keel"',
      "  2 blocks, 12 entries: 11 agree, 1 unresolved",
      '  break begun by bbbbbbbbbbbb "Turn the table"',
      "    http://c.example/breaks/3",
      '  repaired begun by bbbbbbbbbbbb "Turn the table"',
      "    http://c.example/breaks/2",
      "  fail new-break: 3 entries of keel.lift disagree",
      "  warn resolution-lost: the reference of keel.drag is coarser",
      '  gate FAILS, compared with bbbbbbbbbbbb "Turn the table"',
      "  http://clinograph.example/projects/hull/builds/12",
      CAUTION,
    ]);
  });

  it("says what a dry run and a build in shards are", () => {
    expect(verdictLines(posted({}), { ...told, dryRun: true }, paint(false))).toContain(
      "  a dry run: nothing was kept",
    );
    const receiving = posted({ build: { state: "receiving" }, gate: { decision: "wait" } });
    expect(verdictLines(receiving, told, paint(false)).join("\n")).toMatch(/the last shard/);
  });

  it("colours only where it is asked to", () => {
    expect(verdictLines(posted({}), told, paint(true)).join("")).toContain("\x1b[32m");
    expect(verdictLines(posted({}), told, paint(false)).join("")).not.toContain("\x1b");
  });
});
