import { createHash } from "node:crypto";
import { readFile } from "node:fs/promises";
import type { Readable } from "node:stream";
import type { CommitDocument } from "../../shared/schemas/commit.ts";
import type { Options } from "./arguments.ts";
import type { CiFacts } from "./ciEnvironment.ts";
import { wrongUse } from "./exit.ts";
import type { GitFacts } from "./gitFacts.ts";

/** A document as it was handed over: the server checks it, here only what is filled in is looked at. */
export interface GivenDocument {
  readonly commit?: Partial<CommitDocument>;
  readonly history?: readonly CommitDocument[];
  readonly lane?: string;
  readonly run?: { readonly id?: string; readonly [field: string]: unknown };
  readonly shard?: { readonly index: number; readonly count: number };
  readonly [field: string]: unknown;
}

/** A document ready to be posted. */
export interface ReadyDocument extends GivenDocument {
  readonly format: unknown;
  readonly commit: CommitDocument;
  readonly run: { readonly id: string; readonly [field: string]: unknown };
}

/** Reads the text of a document from a file, or from standard input for `-`. */
export async function readText(file: string, input: Readable): Promise<string> {
  if (file === "-") {
    const chunks: Buffer[] = [];
    for await (const chunk of input) chunks.push(Buffer.from(chunk as Uint8Array));
    return Buffer.concat(chunks).toString("utf8");
  }
  try {
    return await readFile(file, "utf8");
  } catch (error) {
    throw wrongUse(`Cannot read ${file}: ${(error as NodeJS.ErrnoException).code ?? String(error)}.`);
  }
}

/** @throws ReportError (wrong use) where the text is not a JSON object. */
export function parseDocument(text: string): GivenDocument {
  let value: unknown;
  try {
    value = JSON.parse(text.replace(/^\uFEFF/, ""));
  } catch (error) {
    const hint = /[[,:\s]-?(NaN|Infinity)\s*[\],}]/.test(text)
      ? '\nIt seems to hold NaN or Infinity as bare words: send them as strings, "NaN", "Infinity", "-Infinity".'
      : "";
    throw wrongUse(`The document is not JSON: ${(error as Error).message}.${hint}`);
  }
  if (typeof value !== "object" || value === null || Array.isArray(value)) {
    throw wrongUse("The document must be a JSON object with blocks in it.");
  }
  const document = value as GivenDocument;
  for (const part of ["commit", "run"] as const) {
    const told: unknown = document[part];
    if (told !== undefined && (typeof told !== "object" || told === null || Array.isArray(told))) {
      throw wrongUse(`"${part}" in the document must be an object.`);
    }
  }
  return document;
}

export interface Surroundings {
  readonly git: GitFacts | null;
  readonly ci: CiFacts;
}

/**
 * Fills in what the document leaves out. Options stand above the document, the document above what was found.
 * @throws ReportError (wrong use) where the commit is nowhere told, or shards have nothing in common.
 */
export function completeDocument(
  given: GivenDocument,
  options: Pick<Options, "lane" | "shard" | "runId">,
  { git, ci }: Surroundings,
): ReadyDocument {
  const sha = given.commit?.sha ?? git?.commit.sha ?? ci.sha;
  if (!sha) throw wrongUse("Of which commit? There is no git repository here and the document has no commit.sha.");
  const branch = ci.branch ?? git?.branch ?? null;
  const commit = { ...git?.commit, ...(branch === null ? {} : { branch }), ...given.commit, sha };
  const lane = options.lane ?? given.lane;
  const shard = options.shard ?? given.shard ?? ci.shard ?? undefined;
  const { run: toldRun, shard: _, ...rest } = given;
  const whole = {
    format: "clinograph.build/1",
    ...rest,
    commit,
    history: given.history ?? git?.history ?? [],
    ...(lane === undefined ? {} : { lane }),
    ...(shard === undefined || shard.count === 1 ? {} : { shard }),
  };
  const sharded = "shard" in whole;
  const runId = options.runId ?? toldRun?.id ?? runIdOf(ci, sharded) ?? contentId(whole, sharded);
  const url = ci.runUrl === null ? {} : { url: ci.runUrl };
  return { ...whole, run: { ...url, ...toldRun, id: runId } };
}

export function runIdOf(ci: CiFacts, sharded: boolean): string | null {
  if (ci.runId === null) return null;
  return sharded || ci.attempt === null ? ci.runId : `${ci.runId}.${ci.attempt}`;
}

/**
 * Outside a known CI system a build is named after its content: the same document posted again, by whatever process,
 * is the same build and answered as before; another one is a new build. Shards differ in content, so they need a name
 * from outside.
 */
function contentId(whole: object, sharded: boolean): string {
  if (sharded) throw wrongUse("The shards of a build need something in common: give each the same --run-id.");
  return `content-${createHash("sha256").update(JSON.stringify(whole)).digest("hex").slice(0, 24)}`;
}
