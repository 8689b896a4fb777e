/**
 * Everything that must hold before a change is merged, each step with its time; the last line is `N passed, N failed`
 * (tests, and one for each step that is no test run). Ends with 1 where anything failed.
 */
import { spawnSync } from "node:child_process";
import { existsSync, mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { BUDGET_KB, measureFirstLoad } from "./machine/budget.mjs";
import { findChromium } from "./machine/chromium.mjs";
import { countTests } from "./machine/countTests.mjs";

const root = dirname(dirname(fileURLToPath(import.meta.url)));
const tools = (...parts) => join(root, "node_modules", ...parts);
let passed = 0;
let failed = 0;

function run(file, args) {
  const chromium = findChromium();
  const env = { ...process.env, ...(chromium === null ? {} : { CHROMIUM_PATH: chromium }) };
  return spawnSync(process.execPath, [file, ...args], { cwd: root, stdio: "inherit", env }).status === 0;
}

/** Runs one step; it answers true, false, or counts of its own. */
function step(name, work) {
  console.log(`\n== ${name}`);
  const started = Date.now();
  let outcome;
  try {
    outcome = work();
  } catch (error) {
    console.error(error instanceof Error ? error.message : error);
    outcome = false;
  }
  const counts = typeof outcome === "boolean" ? { passed: outcome ? 1 : 0, failed: outcome ? 0 : 1 } : outcome;
  passed += counts.passed;
  failed += counts.failed;
  console.log(
    `== ${name}: ${counts.failed === 0 ? "good" : "FAILED"} (${((Date.now() - started) / 1000).toFixed(1)} s)`,
  );
}

function weighFirstLoad() {
  const { kb, chunks } = measureFirstLoad(join(root, "dist", "pages"));
  for (const chunk of chunks) console.log(`${chunk.kb.toFixed(1).padStart(8)} KB  ${chunk.file}`);
  console.log(`first load of the overview: ${kb.toFixed(1)} KB compressed, of ${BUDGET_KB} KB allowed`);
  return kb <= BUDGET_KB;
}

function runTests() {
  const folder = mkdtempSync(join(tmpdir(), "clinograph-tests-"));
  const file = join(folder, "report.json");
  try {
    const ended = run(tools("vitest", "vitest.mjs"), [
      "run",
      "--reporter=default",
      "--reporter=json",
      `--outputFile.json=${file}`,
    ]);
    if (!existsSync(file)) return false;
    const counts = countTests(JSON.parse(readFileSync(file, "utf8")));
    // An error outside any test (an unhandled rejection) fails the run without failing a test.
    return ended || counts.failed > 0 ? counts : { ...counts, failed: 1 };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

step("format", () => run(tools("prettier", "bin", "prettier.cjs"), ["--check", "--log-level", "warn", "."]));
step("lint", () => run(tools("eslint", "bin", "eslint.js"), ["--max-warnings", "0", "."]));
step("types", () => run(tools("vue-tsc", "bin", "vue-tsc.js"), ["--noEmit"]));
// Before the tests: the end-to-end tests drive what was built.
step("build", () => run(join(root, "scripts", "build.mjs"), []));
step("first load", weighFirstLoad);
step("tests", runTests);

console.log(`\n${passed} passed, ${failed} failed`);
process.exitCode = failed === 0 ? 0 : 1;
