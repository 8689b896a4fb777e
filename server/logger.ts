import { pino } from "pino";
import type { Logger } from "pino";

export type { Logger } from "pino";

/** Structured lines on standard output. Credentials never reach them. */
export function createLogger(level: string): Logger {
  return pino({
    level,
    base: undefined,
    timestamp: pino.stdTimeFunctions.isoTime,
    redact: [
      "req.headers.authorization",
      "req.headers.cookie",
      "req.headers['x-csrf-token']",
      "res.headers['set-cookie']",
    ],
  });
}
