import type { Readable, Writable } from "node:stream";
import { DEFAULT_LANE } from "../../shared/domain/vocabulary.ts";
import type { PostedBuild } from "../../shared/schemas/build.ts";
import type { CommitDocument } from "../../shared/schemas/commit.ts";
import { parseArguments } from "./arguments.ts";
import type { Environment, Options } from "./arguments.ts";
import { ciFacts } from "./ciEnvironment.ts";
import { completeDocument, parseDocument, readText, runIdOf } from "./document.ts";
import { EXIT, ReportError, wrongUse } from "./exit.ts";
import type { ExitCode } from "./exit.ts";
import { gitFacts } from "./gitFacts.ts";
import { HELP } from "./help.ts";
import type { Retrying } from "./http.ts";
import { closeBuild, findReceiving, postDocument } from "./post.ts";
import { paint, verdictLines } from "./print.ts";
import { VERSION } from "./version.ts";
import { isUndecided, waitForGate } from "./wait.ts";

/** What a process has around it; handed in, so that a test can bring its own. */
export interface Surroundings {
  readonly environment: Environment;
  /** Where git is asked. */
  readonly folder: string;
  readonly input: Readable;
  readonly output: Writable & { readonly isTTY?: boolean };
  readonly errors: Writable;
}

interface Answered {
  readonly posted: PostedBuild;
  readonly known: readonly CommitDocument[];
}

/** The reporter from its command line to its exit code; see `help.ts`. */
export async function main(argv: readonly string[], around: Surroundings): Promise<ExitCode> {
  try {
    const options = parseArguments(argv, around.environment);
    if (options === "help" || options === "version") {
      around.output.write(options === "help" ? HELP : `${VERSION}\n`);
      return EXIT.pass;
    }
    const retrying: Retrying = {
      patienceMs: options.patienceSeconds * 1000,
      onRetry: (reason, delay) => around.errors.write(`${reason}; again in ${(delay / 1000).toFixed(1)} s\n`),
    };
    const { posted, known } = await answer(options, around, retrying);
    const { json, project, dryRun } = options;
    const coloured = around.output.isTTY === true && !around.environment.NO_COLOR;
    const lines = json
      ? [JSON.stringify(posted, null, 2)]
      : verdictLines(posted, { project, dryRun, known }, paint(coloured));
    around.output.write(`${lines.join("\n")}\n`);
    return exitOf(posted);
  } catch (error) {
    // Node would end with 1, which says that the gate fails.
    const known = error instanceof ReportError;
    around.errors.write(`${known ? error.message : `The reporter itself failed: ${String(error)}`}\n`);
    return known ? error.exitCode : EXIT.notPosted;
  }
}

/** The policy decides what an unknown commit means: its reasons carry the severity. */
function exitOf({ gate }: PostedBuild): ExitCode {
  const fails = gate.decision === "fail" || gate.reasons.some(({ severity }) => severity === "fail");
  return fails ? EXIT.gateFailed : EXIT.pass;
}

async function answer(options: Options, around: Surroundings, retrying: Retrying): Promise<Answered> {
  const first = options.file === null ? await closeOnly(options, around, retrying) : await post(options, around);
  const { posted } = first;
  const waits = options.waitSeconds !== null && !options.dryRun && isUndecided(posted);
  return waits ? { ...first, posted: await waitForGate(options, posted, options.waitSeconds!, retrying) } : first;

  async function post({ file, history, dryRun, close }: Options, { environment, folder, input, errors }: Surroundings) {
    const given = parseDocument(await readText(file!, input));
    const git = gitFacts(folder, given.commit?.sha ?? "HEAD", history);
    if (git?.shallow && given.history === undefined && git.history.length < history) {
      errors.write(`The clone is shallow: only ${git.history.length} earlier commits can be told.\n`);
    }
    const document = completeDocument(given, options, { git, ci: ciFacts(environment) });
    // What the document says has not been checked yet.
    const known = [document.commit, ...(Array.isArray(document.history) ? document.history : [])];
    const first = await postDocument(options, document, { dryRun }, retrying);
    const closes = close && first.build.state === "receiving";
    return { posted: closes ? await closeBuild(options, first.build.id, retrying) : first, known };
  }
}

async function closeOnly(
  options: Options,
  { environment, folder }: Surroundings,
  retrying: Retrying,
): Promise<Answered> {
  const ci = ciFacts(environment);
  const git = gitFacts(folder, "HEAD", 0);
  const commit = git?.commit.sha ?? ci.sha;
  const runId = options.runId ?? runIdOf(ci, true);
  if (!commit) throw wrongUse("Of which commit? There is no git repository here.");
  if (!runId) throw wrongUse("Of which run? Give the --run-id that the shards were posted with.");
  const build = await findReceiving(options, { commit, lane: options.lane ?? DEFAULT_LANE, runId }, retrying);
  if (!build) throw wrongUse(`No build of ${commit.slice(0, 12)} with run id ${runId} waits for shards.`);
  return { posted: await closeBuild(options, build.id, retrying), known: git ? [git.commit] : [] };
}
