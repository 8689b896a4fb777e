import { wrongUse } from "./exit.ts";
import { httpUrl } from "./httpUrl.ts";

export const DEFAULT_HISTORY = 200;
export const DEFAULT_WAIT_SECONDS = 600;
export const DEFAULT_PATIENCE_SECONDS = 120;
const MOST_HISTORY = 10_000;

export interface Shard {
  /** From 0. */
  readonly index: number;
  readonly count: number;
}

export interface Options {
  /** Without a slash at the end. */
  readonly server: string;
  readonly project: string;
  readonly token: string;
  /** Null where a build is only to be closed. */
  readonly file: string | null;
  readonly lane: string | null;
  /** `count` 1 means: no shards, whatever the CI system says. */
  readonly shard: Shard | null;
  readonly runId: string | null;
  readonly history: number;
  readonly close: boolean;
  readonly waitSeconds: number | null;
  readonly patienceSeconds: number;
  readonly dryRun: boolean;
  readonly json: boolean;
}

export type Environment = Readonly<Record<string, string | undefined>>;

const SWITCHES = ["close", "dry-run", "json", "help", "version"];
const WITH_VALUE = ["server", "project", "lane", "shard", "run-id", "history", "patience"];

interface Words {
  readonly given: ReadonlyMap<string, string>;
  readonly files: readonly string[];
}

/** Splits a command line into options and files. `--wait` takes a number if one follows. */
function words(argv: readonly string[]): Words {
  const given = new Map<string, string>();
  const files: string[] = [];
  for (let at = 0; at < argv.length; at += 1) {
    const word = argv[at]!;
    if (word === "-" || !word.startsWith("-")) {
      files.push(word);
      continue;
    }
    const [, name, inline] = /^--([a-z-]+)(?:=(.*))?$/s.exec(word) ?? [];
    if (name === "token") throw wrongUse("The token is not taken from the command line: set CLINOGRAPH_TOKEN.");
    if (name === undefined || ![...SWITCHES, ...WITH_VALUE, "wait"].includes(name)) {
      throw wrongUse(`There is no option ${word.split("=")[0]}; --help lists them.`);
    }
    if (given.has(name)) throw wrongUse(`--${name} is given twice.`);
    const next = argv[at + 1];
    if (SWITCHES.includes(name)) {
      if (inline !== undefined) throw wrongUse(`--${name} takes no value.`);
      given.set(name, "");
    } else if (name === "wait") {
      const follows = inline === undefined && next !== undefined && /^\d+$/.test(next);
      given.set(name, follows ? next : (inline ?? String(DEFAULT_WAIT_SECONDS)));
      if (follows) at += 1;
    } else {
      const value = inline ?? next;
      if (value === undefined || value === "") throw wrongUse(`--${name} needs a value.`);
      given.set(name, value);
      if (inline === undefined) at += 1;
    }
  }
  return { given, files };
}

/**
 * What the command line and the environment ask for.
 * @throws ReportError (wrong use) that says what is missing or not understood.
 */
export function parseArguments(argv: readonly string[], environment: Environment): Options | "help" | "version" {
  const { given, files } = words(argv);
  if (given.has("help")) return "help";
  if (given.has("version")) return "version";
  if (files.length > 1) throw wrongUse(`One document at a time, please: ${files.join(", ")}.`);
  const close = given.has("close");
  if (files.length === 0 && !close) throw wrongUse("Which document? Name a file, or - for standard input.");
  if (files.length === 0 && given.has("dry-run")) throw wrongUse("--dry-run needs a document.");
  if (close && given.has("dry-run")) throw wrongUse("A dry run keeps nothing that --close could complete.");
  const token = tokenFrom(environment.CLINOGRAPH_TOKEN);
  return {
    server: serverUrl(given.get("server") ?? environment.CLINOGRAPH_URL),
    project: projectSlug(given.get("project") ?? environment.CLINOGRAPH_PROJECT),
    token,
    file: files[0] ?? null,
    lane: given.get("lane") ?? null,
    shard: given.has("shard") ? shard(given.get("shard")!) : null,
    runId: given.get("run-id") ?? null,
    history: whole("history", given.get("history"), DEFAULT_HISTORY, MOST_HISTORY),
    close,
    waitSeconds: given.has("wait") ? whole("wait", given.get("wait"), DEFAULT_WAIT_SECONDS, 86_400) : null,
    patienceSeconds: whole("patience", given.get("patience"), DEFAULT_PATIENCE_SECONDS, 86_400),
    dryRun: given.has("dry-run"),
    json: given.has("json"),
  };
}

function whole(name: string, text: string | undefined, fallback: number, most: number): number {
  if (text === undefined) return fallback;
  if (!/^\d{1,6}$/.test(text) || Number(text) > most) {
    throw wrongUse(`--${name} must be a whole number from 0 to ${most}, not ${text}.`);
  }
  return Number(text);
}

/** A secret that came with a line break would end, spelled out, in an error message of fetch. */
function tokenFrom(text: string | undefined): string {
  const token = text?.trim();
  if (!token) throw wrongUse("CLINOGRAPH_TOKEN is not set; a lead of the project makes a token with the scope post.");
  if (!/^[\x21-\x7e]+$/.test(token)) throw wrongUse("CLINOGRAPH_TOKEN holds characters that no token has.");
  return token;
}

function serverUrl(text: string | undefined): string {
  if (!text) throw wrongUse("Where is the server? Give --server or set CLINOGRAPH_URL.");
  const url = httpUrl(text);
  if (url === null) throw wrongUse(`The server's address must begin with http:// or https://, not ${text}.`);
  if (url.username || url.password || url.search || url.hash) {
    throw wrongUse("The server's address is host and path alone, without a name, password, ? or #.");
  }
  return url.href.replace(/\/+$/, "");
}

function projectSlug(text: string | undefined): string {
  if (!text) throw wrongUse("Which project? Give --project or set CLINOGRAPH_PROJECT.");
  return text;
}

function shard(text: string): Shard {
  const [, at, count] = /^(\d{1,5})\/(\d{1,5})$/.exec(text) ?? [];
  if (at === undefined || Number(at) < 1 || Number(at) > Number(count) || Number(count) > 10_000) {
    throw wrongUse(`--shard must be like 2/4, counted from 1, not ${text}.`);
  }
  return { index: Number(at) - 1, count: Number(count) };
}
