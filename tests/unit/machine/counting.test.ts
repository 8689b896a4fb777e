import { mkdirSync, mkdtempSync, rmSync, utimesSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { describe, expect, it } from "vitest";

interface Report {
  readonly numPassedTests: number;
  readonly numFailedTests: number;
  readonly numTotalTests: number;
  readonly testResults: readonly { status: string; assertionResults: readonly { status: string }[] }[];
}
type Manifest = Readonly<Record<string, { readonly file: string; readonly imports?: readonly string[] }>>;

/** The scripts are plain JavaScript, so that they run before anything is installed: their types are told here. */
async function load<T>(name: string): Promise<T> {
  return (await import(new URL(`../../../scripts/machine/${name}.mjs`, import.meta.url).href)) as T;
}

describe("counting tests", () => {
  const passed = { status: "passed", assertionResults: [{ status: "passed" }] };
  const count = async (report: Report) =>
    (await load<{ countTests: (r: Report) => { passed: number; failed: number } }>("countTests")).countTests(report);

  it("counts a file that could not be loaded as a failure, but not twice", async () => {
    const unloaded = { status: "failed", assertionResults: [] };
    const failed = { status: "failed", assertionResults: [{ status: "failed" }] };
    const base = { numPassedTests: 1, numTotalTests: 1 };
    expect(await count({ ...base, numFailedTests: 0, testResults: [passed] })).toEqual({ passed: 1, failed: 0 });
    expect(await count({ ...base, numFailedTests: 0, testResults: [passed, unloaded] })).toEqual({
      passed: 1,
      failed: 1,
    });
    expect(await count({ ...base, numFailedTests: 1, testResults: [passed, failed] })).toEqual({
      passed: 1,
      failed: 1,
    });
  });

  it("counts no tests at all as a failure", async () => {
    const none = { numPassedTests: 0, numFailedTests: 0, numTotalTests: 0, testResults: [] };
    expect(await count(none)).toEqual({ passed: 0, failed: 1 });
  });
});

describe("the first load", () => {
  it("is the entry and the overview's views with all that they import, each chunk once", async () => {
    const { firstLoad } = await load<{ firstLoad: (m: Manifest) => string[] }>("budget");
    const manifest: Manifest = {
      "index.html": { file: "index.js", imports: ["_vue.js"] },
      "_vue.js": { file: "vue.js" },
      "src/views/ProjectFrameView.vue": { file: "frame.js", imports: ["_vue.js"] },
      "src/views/OverviewDetailView.vue": { file: "overview.js", imports: ["_strip.js"] },
      "_strip.js": { file: "strip.js", imports: ["index.html"] },
      "src/views/BreakListView.vue": { file: "breaks.js" },
    };
    expect(firstLoad(manifest)).toEqual(["index.js", "vue.js", "frame.js", "overview.js", "strip.js"]);
    expect(() => firstLoad({ "index.html": { file: "index.js" } })).toThrow(/ProjectFrameView/);
  });
});

describe("whether a build is needed", () => {
  it("looks at every source, and at files that were taken away", async () => {
    const { isBuilt, stampFile } = await load<{ isBuilt: (r: string) => boolean; stampFile: (r: string) => string }>(
      "freshness",
    );
    const root = mkdtempSync(join(tmpdir(), "clinograph-freshness-"));
    const built = 1_700_000_000;
    const touch = (path: string, time: number) => utimesSync(join(root, path), time, time);
    try {
      expect(isBuilt(root)).toBe(false);
      mkdirSync(join(root, "shared", "domain"), { recursive: true });
      writeFileSync(join(root, "shared", "domain", "roles.ts"), "");
      for (const path of ["shared/domain/roles.ts", "shared/domain", "shared"]) touch(path, built - 10);
      mkdirSync(dirname(stampFile(root)), { recursive: true });
      writeFileSync(stampFile(root), "");
      utimesSync(stampFile(root), built, built);
      expect(isBuilt(root)).toBe(true);
      touch("shared/domain/roles.ts", built + 10);
      expect(isBuilt(root)).toBe(false);
      touch("shared/domain/roles.ts", built - 10);
      touch("shared/domain", built + 10);
      expect(isBuilt(root)).toBe(false);
    } finally {
      rmSync(root, { recursive: true, force: true });
    }
  });
});
