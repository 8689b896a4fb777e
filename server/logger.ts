import { pino } from "pino";
import type { Logger } from "pino";

export type { Logger } from "pino";

/** Structured lines on standard output. Requests are told by method and address only: credentials never reach them. */
export function createLogger(level: string): Logger {
  return pino({ level, base: undefined, timestamp: pino.stdTimeFunctions.isoTime });
}
