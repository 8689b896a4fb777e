import { spawnSync } from "node:child_process";
import { cpSync, existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, utimesSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterEach, beforeEach, describe, expect, it } from "vitest";

const scripts = fileURLToPath(new URL("../../../scripts", import.meta.url));
const INSTALLED = "node_modules/.package-lock.json";
/** Stands in for npm: notes how it was called, and leaves what an installation leaves. */
const NPM = `
const { appendFileSync, mkdirSync, writeFileSync } = require("node:fs");
appendFileSync("calls", process.argv.slice(2).join(" ") + "\\n");
if (process.env.NPM_FAILS) process.exit(1);
mkdirSync("node_modules", { recursive: true });
writeFileSync("${INSTALLED}", "{}");
`;

let root: string;
beforeEach(() => {
  root = mkdtempSync(join(tmpdir(), "clinograph-prepare-"));
  cpSync(join(scripts, "prepare.mjs"), join(root, "scripts", "prepare.mjs"), { recursive: true });
  cpSync(join(scripts, "machine"), join(root, "scripts", "machine"), { recursive: true });
  writeFileSync(join(root, "package-lock.json"), "{}");
  writeFileSync(join(root, "npm.js"), NPM);
});
afterEach(() => rmSync(root, { recursive: true, force: true }));

function prepare(argv: readonly string[] = [], environment: Record<string, string> = {}) {
  const { status, stdout, stderr } = spawnSync(process.execPath, [join(root, "scripts", "prepare.mjs"), ...argv], {
    cwd: root,
    encoding: "utf8",
    env: { PATH: process.env.PATH ?? "", npm_execpath: join(root, "npm.js"), ...environment },
  });
  return { status, said: stdout + stderr };
}

const calls = () => (existsSync(join(root, "calls")) ? readFileSync(join(root, "calls"), "utf8") : "");

function install(secondsAfterLock: number): void {
  mkdirSync(join(root, "node_modules"));
  writeFileSync(join(root, INSTALLED), "{}");
  const lock = 1_700_000_000;
  utimesSync(join(root, "package-lock.json"), lock, lock);
  utimesSync(join(root, INSTALLED), lock + secondsAfterLock, lock + secondsAfterLock);
}

describe("preparing a clone", { timeout: 60_000 }, () => {
  it("installs exactly the lock file's packages, once", () => {
    expect(prepare().status).toBe(0);
    expect(calls()).toBe("ci --no-audit --no-fund\n");
    expect(prepare()).toEqual({ status: 0, said: "" });
    expect(calls()).toBe("ci --no-audit --no-fund\n");
  });

  it("says nothing where packages are newer than the lock file, and installs anew where they are older", () => {
    install(60);
    expect(prepare()).toEqual({ status: 0, said: "" });
    expect(calls()).toBe("");
    rmSync(join(root, "node_modules"), { recursive: true });
    install(-60);
    expect(prepare().status).toBe(0);
    expect(calls()).toBe("ci --no-audit --no-fund\n");
  });

  it("stops where the installation fails", () => {
    expect(prepare([], { NPM_FAILS: "1" })).toMatchObject({
      status: 1,
      said: expect.stringContaining("npm ci failed"),
    });
  });

  it("names the compilers that are missing before it begins", () => {
    const { status, said } = prepare([], { PATH: join(root, "nowhere") });
    expect(status).toBe(1);
    expect(said).toContain("needs python3, make, g++");
    expect(calls()).toBe("");
  });

  it("takes the browser that CHROMIUM_PATH names, and says so when it is not there", () => {
    install(60);
    expect(prepare(["--browser"], { CHROMIUM_PATH: process.execPath })).toEqual({ status: 0, said: "" });
    const absent = prepare(["--browser"], { CHROMIUM_PATH: join(root, "absent") });
    expect(absent).toMatchObject({ status: 1, said: expect.stringContaining("CHROMIUM_PATH names") });
  });
});
