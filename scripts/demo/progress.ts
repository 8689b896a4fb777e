import type { Writable } from "node:stream";

export interface Progress {
  at(done: number, of: number, what: string): void;
  done(): void;
}

const WIDTH = 30;
/** Without a terminal: a line for so many commits. */
const EVERY = 10;

/** A bar on a terminal, plain lines elsewhere. */
export function progressOn(output: Writable & { readonly isTTY?: boolean; readonly columns?: number }): Progress {
  if (output.isTTY !== true) {
    return {
      at: (done, of, what) => {
        if (done % EVERY === 0 || done === of) output.write(`posted ${done} of ${of} commits (${what})\n`);
      },
      done: () => undefined,
    };
  }
  return {
    at: (done, of, what) => {
      const filled = Math.round((WIDTH * done) / of);
      const bar = `${"#".repeat(filled)}${".".repeat(WIDTH - filled)}`;
      const line = `[${bar}] ${done}/${of} ${what}`;
      output.write(`\r\x1b[2K${line.slice(0, (output.columns ?? 80) - 1)}`);
    },
    done: () => output.write("\r\x1b[2K"),
  };
}
