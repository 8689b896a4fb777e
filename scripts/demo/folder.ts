import { createHash } from "node:crypto";
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import type { DemoCommit } from "./history/history.ts";

/** Lies beside the database and says how far its seeding came: half a history is not shown as a whole one. */
const MARKER = "demo.json";

interface Marker {
  readonly history: string;
  readonly complete: boolean;
  /** Milliseconds since 1970; the history's dates count from here. */
  readonly seededAt: number;
}

/** Tells one script of the history from another; its dates do not matter. */
const nameOf = (history: readonly DemoCommit[]): string =>
  createHash("sha256")
    .update(history.map(({ commit, code, lanes }) => JSON.stringify([commit.sha, code, lanes])).join("\n"))
    .digest("hex");

const writeMarker = (folder: string, marker: Marker): void =>
  writeFileSync(join(folder, MARKER), `${JSON.stringify(marker)}\n`);

export interface DemoFolder {
  /** When the history that is in it was posted; null where it has to be posted. */
  readonly seededAt: number | null;
  complete(): void;
}

/**
 * Makes the folder ready: kept where it holds this history, complete; made anew where it holds an unfinished or an
 * older one. @throws Error where it holds something that the demo did not put there.
 */
export function prepareFolder(folder: string, history: readonly DemoCommit[], now: number, fresh: boolean): DemoFolder {
  const name = nameOf(history);
  const file = join(folder, MARKER);
  const marker = existsSync(file) ? (JSON.parse(readFileSync(file, "utf8")) as Marker) : null;
  const whole = marker?.complete === true && marker.history === name && !fresh;
  if (!whole) {
    if (marker === null && existsSync(folder) && readdirSync(folder).length > 0) {
      throw new Error(`${folder} holds something else than the demo's data: name another folder with --data.`);
    }
    rmSync(folder, { recursive: true, force: true });
    mkdirSync(folder, { recursive: true, mode: 0o700 });
    writeMarker(folder, { history: name, complete: false, seededAt: now });
  }
  return {
    seededAt: whole ? marker.seededAt : null,
    complete: () => writeMarker(folder, { history: name, complete: true, seededAt: now }),
  };
}
