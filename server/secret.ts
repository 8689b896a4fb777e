import { createHmac, randomBytes } from "node:crypto";
import { readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import type { Config } from "./config.ts";

/** The configured secret, or the one kept in the data folder, made on first use (32 random bytes, readable by its owner only). */
export function keptSecret(config: Config): string {
  if (config.secret !== null) return config.secret;
  const file = join(config.dataFolder, "secret");
  try {
    writeFileSync(file, `${randomBytes(32).toString("hex")}\n`, { mode: 0o600, flag: "wx" });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== "EEXIST") throw error;
  }
  return readFileSync(file, "utf8").trim();
}

/** A key for one purpose: what signs sessions must not sign anything else. */
export function derivedKey(secret: string, purpose: string): Buffer {
  return createHmac("sha256", secret).update(purpose).digest();
}
