import { setFlagsFromString } from "node:v8";
import { runInNewContext } from "node:vm";

/** Below this the engine's own pace is good enough. */
const WORTH_BYTES = 4 * 1024 * 1024;

let collect: (() => void) | null = null;

/**
 * Frees what was let go, where `bytes` of it are worth a pause of a few milliseconds. A large body, its text and its
 * parsed document follow one another; the engine, which sees none of them as a burden of its heap, would keep all three.
 */
export function collectGarbage(bytes: number): void {
  if (bytes < WORTH_BYTES) return;
  if (collect === null) {
    setFlagsFromString("--expose-gc");
    collect = runInNewContext("gc") as () => void;
  }
  collect();
}
