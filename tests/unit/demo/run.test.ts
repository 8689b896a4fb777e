import { spawn } from "node:child_process";
import { mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { prepareFolder } from "../../../scripts/demo/folder.ts";
import { demoHistory } from "../../../scripts/demo/history/history.ts";
import { PLANTED } from "../../../scripts/demo/planted.ts";

const script = fileURLToPath(new URL("../../../scripts/demo/index.ts", import.meta.url));

let folder = "";
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "clinograph-demo-"));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

interface Ended {
  readonly code: number | null;
  readonly output: string;
  readonly errors: string;
}

/** Runs the demo as `npm run demo -- --once` does, on a free port; interrupted once its output holds `interruptAt`. */
function runDemo(data: string, interruptAt?: string): Promise<Ended> {
  const child = spawn(process.execPath, ["--import", "tsx", script, "--once", "--data", data, "--port", "0"]);
  let output = "";
  let errors = "";
  let interrupted = false;
  child.stdout.on("data", (chunk: Buffer) => {
    output += chunk.toString();
    if (interruptAt === undefined || interrupted || !output.includes(interruptAt)) return;
    interrupted = true;
    child.kill("SIGINT");
  });
  child.stderr.on("data", (chunk: Buffer) => {
    errors += chunk.toString();
  });
  return new Promise((resolve) => child.on("close", (code) => resolve({ code, output, errors })));
}

describe("npm run demo", () => {
  it(
    "stops when interrupted, then posts all, names every mistake, and posts nothing again",
    { timeout: 400_000 },
    async () => {
      const data = join(folder, "data");
      const cut = await runDemo(data, "posted 10 of");
      expect(cut).toMatchObject({ code: 0, errors: "" });
      expect(cut.output).not.toContain("planted mistakes are named");

      const whole = await runDemo(data);
      expect(whole).toMatchObject({ code: 0, errors: "" });
      expect(whole.output).toContain("Posting the history");
      const table = whole.output.slice(whole.output.indexOf("planted mistake "));
      expect(table).toContain(`${PLANTED.length} of ${PLANTED.length} planted mistakes are named by their commit.`);
      for (const { what } of PLANTED) expect(table).toMatch(new RegExp(`^${what} .* right `, "m"));
      expect(table).toMatch(
        /told as a climb .* \d+ builds before it became a break; by now [5-9]\.\d decades in \d+ builds/,
      );

      const again = await runDemo(data);
      expect(again).toMatchObject({ code: 0, errors: "" });
      expect(again.output).not.toContain("Posting the history");
      expect(again.output.slice(again.output.indexOf("planted mistake "))).toBe(table);
    },
  );
});

describe("the demo's data folder", () => {
  const history = demoHistory(Date.UTC(2026, 5, 1));

  it("is posted to until it is complete, and then kept", () => {
    const data = join(folder, "data");
    expect(prepareFolder(data, history, 1000, false).seededAt).toBeNull();
    writeFileSync(join(data, "clinograph.sqlite"), "half a history");
    const second = prepareFolder(data, history, 2000, false);
    expect(second.seededAt).toBeNull();
    expect(readdirSync(data)).not.toContain("clinograph.sqlite");
    second.complete();
    writeFileSync(join(data, "clinograph.sqlite"), "a whole history");
    expect(prepareFolder(data, history, 3000, false).seededAt).toBe(2000);
    expect(readdirSync(data)).toContain("clinograph.sqlite");
  });

  it("is made anew when asked for, and when the history was written anew", () => {
    const data = join(folder, "data");
    prepareFolder(data, history, 1000, false).complete();
    expect(prepareFolder(data, history.slice(0, -1), 2000, false).seededAt).toBeNull();
    prepareFolder(data, history, 3000, false).complete();
    expect(prepareFolder(data, history, 4000, true).seededAt).toBeNull();
  });

  it("is left alone where something else lies in it", () => {
    const data = join(folder, "data");
    mkdirSync(data);
    writeFileSync(join(data, "letters.txt"), "not ours");
    expect(() => prepareFolder(data, history, 1000, true)).toThrow(/something else/);
    expect(readdirSync(data)).toEqual(["letters.txt"]);
  });
});
