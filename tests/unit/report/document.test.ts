import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import type { CiFacts } from "../../../scripts/report/ciEnvironment.ts";
import { completeDocument, parseDocument } from "../../../scripts/report/document.ts";
import { ReportError } from "../../../scripts/report/exit.ts";
import { VERSION } from "../../../scripts/report/version.ts";

const sha = "1".repeat(40);
const other = "2".repeat(40);
const NO_CI: CiFacts = { runId: null, attempt: null, runUrl: null, branch: null, sha: null, shard: null };
const git = {
  commit: { sha, parents: [other], subject: "From git", changedPaths: ["a.f90"] },
  history: [{ sha: other, subject: "Earlier" }],
  branch: "main",
  shallow: false,
};
const NOTHING = { lane: null, shard: null, runId: null };

describe("filling in a document", () => {
  it("takes format, commit, branch and history from git", () => {
    const document = completeDocument({ blocks: [] }, NOTHING, { git, ci: NO_CI });
    expect(document).toMatchObject({
      format: "clinograph.build/1",
      commit: { sha, parents: [other], subject: "From git", branch: "main", changedPaths: ["a.f90"] },
      history: [{ sha: other }],
      blocks: [],
    });
    expect(document).not.toHaveProperty("lane");
    expect(document).not.toHaveProperty("shard");
  });

  it("lets stand what the document says", () => {
    const given = {
      format: "clinograph.build/2",
      commit: { subject: "Told", branch: "wake" },
      history: [],
      lane: "gcc",
      run: { id: "mine", url: "https://ci.example/1", startedAt: "2026-03-01T09:00:00Z" },
    };
    const ci = { ...NO_CI, runId: "x", runUrl: "https://ci.example/2", branch: "ci" };
    const document = completeDocument(given, NOTHING, { git, ci });
    expect(document).toMatchObject(given);
    expect(document.commit).toMatchObject({ sha, parents: [other] });
  });

  it("lets options stand above the document, and CI above git for the branch", () => {
    const given = { lane: "gcc", run: { id: "mine" }, shard: { index: 0, count: 2 } };
    const options = { lane: "ifx", shard: { index: 1, count: 3 }, runId: "asked" };
    const document = completeDocument(given, options, { git, ci: { ...NO_CI, branch: "ci-branch" } });
    expect(document).toMatchObject({ lane: "ifx", shard: { index: 1, count: 3 }, run: { id: "asked" } });
    expect(document.commit.branch).toBe("ci-branch");
    const whole = completeDocument(given, { ...options, shard: { index: 0, count: 1 } }, { git, ci: NO_CI });
    expect(whole).not.toHaveProperty("shard");
  });

  it("tells attempts of a whole build apart, and not those of a shard", () => {
    const ci = { ...NO_CI, runId: "github-7", attempt: "2" };
    expect(completeDocument({}, NOTHING, { git, ci }).run.id).toBe("github-7.2");
    const sharded = { ...NOTHING, shard: { index: 0, count: 2 } };
    expect(completeDocument({}, sharded, { git, ci }).run.id).toBe("github-7");
  });

  it("names a build after its content where no CI does: the same again is the same build", () => {
    const named = (blocks: unknown[]) => completeDocument({ blocks }, NOTHING, { git, ci: NO_CI }).run.id;
    expect(named([1])).toMatch(/^content-[0-9a-f]{24}$/);
    expect(named([1])).toBe(named([1]));
    expect(named([2])).not.toBe(named([1]));
    const sharded = { ...NOTHING, shard: { index: 0, count: 2 } };
    expect(() => completeDocument({}, sharded, { git, ci: NO_CI })).toThrow(/--run-id/);
  });

  it("needs a commit from somewhere", () => {
    expect(() => completeDocument({}, NOTHING, { git: null, ci: NO_CI })).toThrow(ReportError);
    const document = completeDocument({}, NOTHING, { git: null, ci: { ...NO_CI, sha: other } });
    expect(document).toMatchObject({ commit: { sha: other }, history: [] });
  });
});

describe("reading a document", () => {
  it.each([
    ["[1]", /JSON object/],
    ["null", /JSON object/],
    ['{"a": NaN}', /as strings/],
    ['{"a": [1, -Infinity]}', /as strings/],
    ["{", /not JSON/],
    ['{"commit": "abc"}', /must be an object/],
  ])("refuses %s", (text, message) => {
    expect(() => parseDocument(text)).toThrow(message);
  });

  it("takes a byte order mark", () => {
    expect(parseDocument('\uFEFF{"lane": "gcc"}')).toEqual({ lane: "gcc" });
  });
});

it("bears the version of the package", () => {
  const manifest = readFileSync(new URL("../../../package.json", import.meta.url), "utf8");
  expect(VERSION).toBe((JSON.parse(manifest) as { version: string }).version);
});
