import { existsSync } from "node:fs";
import { availableParallelism } from "node:os";
import { dirname, join, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import { z } from "zod";
import { DEFAULT_LIMITS } from "../shared/domain/limits.ts";
import type { Limits } from "../shared/domain/limits.ts";
import { email, password } from "../shared/schemas/people.ts";

export interface Config {
  readonly port: number;
  readonly host: string;
  /** Folder of the database and the kept secret. */
  readonly dataFolder: string;
  readonly databaseFile: string;
  /** What sessions are signed with; null = made and kept in the data folder. */
  readonly secret: string | null;
  readonly administrator: { readonly email: string; readonly password: string } | null;
  /** Without a slash at the end. */
  readonly publicUrl: string;
  readonly smtpUrl: string | null;
  readonly limits: Limits;
  readonly logLevel: string;
  readonly judgeThreads: number;
  readonly metricsToken: string | null;
  /** Reverse proxies in front whose X-Forwarded-For is believed. */
  readonly trustedProxies: number;
  /** For one token, person or address; 0 = no limit. */
  readonly requestsPerMinute: number;
  /** Built pages and the reporter: `dist/`. */
  readonly builtFolder: string;
  /** Answers are checked against their schemas; the tests switch this on. */
  readonly validateResponses: boolean;
}

const LOG_LEVELS = ["fatal", "error", "warn", "info", "debug", "trace", "silent"] as const;

/** `z.coerce.number` takes the empty text for 0: numbers are spelled out. */
const whole = (min: number, max: number, fallback: number) =>
  z
    .string()
    .regex(/^\d{1,12}$/, "must be a whole number")
    .transform(Number)
    .pipe(z.number().min(min).max(max))
    .default(fallback);
const publicUrl = z
  .url({ protocol: /^https?$/, error: "must be an http or https address" })
  .transform((url) => url.replace(/\/+$/, ""));

const settings = z
  .object({
    PORT: whole(0, 65_535, 4380),
    HOST: z.string().default("127.0.0.1"),
    CLINOGRAPH_DATA: z.string().default(".data/main"),
    CLINOGRAPH_SECRET: z.string().min(32, "must have at least 32 characters").optional(),
    CLINOGRAPH_ADMIN_EMAIL: email.optional(),
    CLINOGRAPH_ADMIN_PASSWORD: password.optional(),
    CLINOGRAPH_PUBLIC_URL: publicUrl.optional(),
    CLINOGRAPH_SMTP_URL: z.url({ protocol: /^smtps?$/, error: "must be an smtp or smtps address" }).optional(),
    CLINOGRAPH_MAX_WIRE_BYTES: whole(1024, 2 ** 31, DEFAULT_LIMITS.wireBytes),
    CLINOGRAPH_MAX_DECODED_BYTES: whole(1024, 2 ** 31, DEFAULT_LIMITS.decodedBytes),
    CLINOGRAPH_MAX_ENTRIES: whole(1, 1e9, DEFAULT_LIMITS.entries),
    CLINOGRAPH_MAX_BLOCKS: whole(1, 1e7, DEFAULT_LIMITS.blocks),
    CLINOGRAPH_JUDGE_THREADS: whole(1, 64, Math.max(1, availableParallelism() - 1)),
    CLINOGRAPH_METRICS_TOKEN: z
      .string()
      .regex(/^\S{16,}$/, "must have at least 16 characters, and no spaces")
      .optional(),
    CLINOGRAPH_TRUSTED_PROXIES: whole(0, 10, 0),
    CLINOGRAPH_REQUESTS_PER_MINUTE: whole(0, 1e6, 3000),
    LOG_LEVEL: z.enum(LOG_LEVELS).default("info"),
  })
  .refine((s) => (s.CLINOGRAPH_ADMIN_EMAIL === undefined) === (s.CLINOGRAPH_ADMIN_PASSWORD === undefined), {
    path: ["CLINOGRAPH_ADMIN_EMAIL"],
    error: "must be set together with CLINOGRAPH_ADMIN_PASSWORD",
  });

export class SettingsError extends Error {
  /** One line a setting. */
  readonly problems: readonly string[];
  constructor(problems: readonly string[]) {
    super(`The settings are not right:\n${problems.map((problem) => `  ${problem}`).join("\n")}`);
    this.problems = problems;
  }
}

type Environment = Readonly<Record<string, string | undefined>>;

/**
 * Settings from an environment; an empty value counts as unset.
 * @throws SettingsError that names every setting that is wrong.
 */
export function loadConfig(environment: Environment): Config {
  const given = Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== ""));
  const parsed = settings.safeParse(given);
  if (!parsed.success) {
    throw new SettingsError(parsed.error.issues.map((issue) => `${issue.path.join(".")}: ${issue.message}`));
  }
  const s = parsed.data;
  const dataFolder = resolve(s.CLINOGRAPH_DATA);
  const host = s.HOST.includes(":") ? `[${s.HOST}]` : s.HOST;
  return {
    port: s.PORT,
    host: s.HOST,
    dataFolder,
    databaseFile: join(dataFolder, "clinograph.sqlite"),
    secret: s.CLINOGRAPH_SECRET ?? null,
    administrator:
      s.CLINOGRAPH_ADMIN_EMAIL !== undefined && s.CLINOGRAPH_ADMIN_PASSWORD !== undefined
        ? { email: s.CLINOGRAPH_ADMIN_EMAIL.toLowerCase(), password: s.CLINOGRAPH_ADMIN_PASSWORD }
        : null,
    publicUrl: s.CLINOGRAPH_PUBLIC_URL ?? `http://${host}:${s.PORT}`,
    smtpUrl: s.CLINOGRAPH_SMTP_URL ?? null,
    limits: {
      wireBytes: s.CLINOGRAPH_MAX_WIRE_BYTES,
      decodedBytes: s.CLINOGRAPH_MAX_DECODED_BYTES,
      entries: s.CLINOGRAPH_MAX_ENTRIES,
      blocks: s.CLINOGRAPH_MAX_BLOCKS,
    },
    logLevel: s.LOG_LEVEL,
    judgeThreads: s.CLINOGRAPH_JUDGE_THREADS,
    metricsToken: s.CLINOGRAPH_METRICS_TOKEN ?? null,
    trustedProxies: s.CLINOGRAPH_TRUSTED_PROXIES,
    requestsPerMinute: s.CLINOGRAPH_REQUESTS_PER_MINUTE,
    builtFolder: join(installedFolder(), "dist"),
    validateResponses: false,
  };
}

/** Settings of this process, `.env` of the working folder included; prints every problem and exits with 2. */
export function readConfig(): Config {
  if (existsSync(".env")) process.loadEnvFile(".env");
  try {
    return loadConfig(process.env);
  } catch (error) {
    if (!(error instanceof SettingsError)) throw error;
    process.stderr.write(`${error.message}\n`);
    process.exit(2);
  }
}

/** The nearest folder above this file that holds a package.json: the same from the sources and from `dist/server`. */
function installedFolder(): string {
  let folder = dirname(fileURLToPath(import.meta.url));
  while (!existsSync(join(folder, "package.json"))) {
    const above = dirname(folder);
    if (above === folder) return process.cwd();
    folder = above;
  }
  return folder;
}
