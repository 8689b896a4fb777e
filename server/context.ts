import { mkdir } from "node:fs/promises";
import { openDatabase } from "./db/database.ts";
import type { Database } from "./db/database.ts";
import type { Config } from "./config.ts";
import { createJudgePool } from "./ingest/judgePool.ts";
import type { JudgePool } from "./ingest/judgePool.ts";
import { createLogger } from "./logger.ts";
import type { Logger } from "./logger.ts";
import { createMetrics } from "./http/metrics.ts";
import type { Metrics } from "./http/metrics.ts";
import { SignInLimits } from "./features/session/signInLimits.ts";
import { derivedKey, keptSecret } from "./secret.ts";

/** What lives as long as the server: handed to every handler, never a module-level variable. */
export interface Context {
  readonly config: Config;
  readonly logger: Logger;
  readonly db: Database;
  readonly judge: JudgePool;
  readonly keys: { readonly session: Buffer; readonly csrf: Buffer };
  readonly signInLimits: SignInLimits;
  readonly metrics: Metrics;
  /** True from the moment the server was asked to stop. */
  draining(): boolean;
  startDraining(): void;
  /** Work that goes on after its answer: a failure is logged, a stop waits for it. */
  background(name: string, work: () => Promise<unknown>): void;
  /** Resolves when no background work is left. */
  idle(): Promise<void>;
}

export async function createContext(config: Config, logger: Logger = createLogger(config.logLevel)): Promise<Context> {
  // Password hashes and the record are nobody's else on this machine.
  await mkdir(config.dataFolder, { recursive: true, mode: 0o700 });
  const secret = keptSecret(config);
  const db = await openDatabase(config.databaseFile);
  let draining = false;
  const background = new Set<Promise<unknown>>();
  return {
    config,
    logger,
    db,
    judge: createJudgePool({ threads: config.judgeThreads }),
    keys: { session: derivedKey(secret, "session"), csrf: derivedKey(secret, "csrf") },
    signInLimits: new SignInLimits(),
    metrics: createMetrics(),
    draining: () => draining,
    startDraining: () => {
      draining = true;
    },
    background: (name, work) => {
      const running = work()
        .catch((error: unknown) => logger.error({ err: error, work: name }, "background work failed"))
        .finally(() => background.delete(running));
      background.add(running);
    },
    idle: async () => {
      while (background.size > 0) await Promise.all(background);
    },
  };
}

/** Waits for judging and writing under way. */
export async function closeContext(context: Context): Promise<void> {
  context.signInLimits.close();
  await context.idle();
  await context.judge.close();
  await context.db.close();
}
