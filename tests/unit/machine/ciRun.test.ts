import { spawnSync } from "node:child_process";
import { chmodSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { delimiter, join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterEach, beforeEach, describe, expect, it } from "vitest";

const script = fileURLToPath(new URL("../../../.ci/run", import.meta.url));

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "clinograph-ci-"));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

/** Runs .ci/run with an npm that says what is given instead of testing; every tool is there, so nothing is installed. */
function runWith(said: string, status: number) {
  for (const tool of ["git", "python3", "make", "g++"]) stub(tool, "");
  writeFileSync(join(folder, "said"), said);
  stub("npm", `cat '${join(folder, "said")}'; exit ${status}`);
  const PATH = `${folder}${delimiter}${process.env.PATH ?? ""}`;
  const ended = spawnSync(script, [], { encoding: "utf8", env: { PATH } });
  return { status: ended.status, lines: ended.stdout.trimEnd().split("\n") };
}

function stub(name: string, body: string): void {
  writeFileSync(join(folder, name), `#!/bin/sh\n${body}\n`);
  chmodSync(join(folder, name), 0o755);
}

describe(".ci/run", () => {
  it("hands on what is said, and ends with the count", () => {
    expect(runWith("== tests\n\n31 passed, 0 failed\n", 0)).toEqual({
      status: 0,
      lines: ["== tests", "", "31 passed, 0 failed"],
    });
  });

  it("says the count again where something follows it, even without a line's end", () => {
    const { status, lines } = runWith("3 passed, 2 failed\nnpm error code 1", 1);
    expect(status).toBe(1);
    expect(lines).toEqual(["3 passed, 2 failed", "npm error code 1", "3 passed, 2 failed"]);
  });

  it("counts a run that ended before its count as a failure, whatever its tests print", () => {
    const { status, lines } = runWith("the shop: 7 passed, 0 failed\n", 1);
    expect(status).toBe(1);
    expect(lines.at(-1)).toBe("0 passed, 1 failed");
    expect(runWith("", 1)).toEqual({ status: 1, lines: ["0 passed, 1 failed"] });
  });
});
