import { CAUTION } from "../../shared/domain/vocabulary.ts";
import type { PostedBuild, SummaryCounts } from "../../shared/schemas/build.ts";
import type { CommitDocument } from "../../shared/schemas/commit.ts";

export interface Paint {
  readonly good: (text: string) => string;
  readonly bad: (text: string) => string;
  readonly warn: (text: string) => string;
  readonly faint: (text: string) => string;
}

const ansi = (code: number) => (text: string) => `\x1b[${code}m${text}\x1b[0m`;
const plain = (text: string) => text;

export const paint = (coloured: boolean): Paint =>
  coloured
    ? { good: ansi(32), bad: ansi(31), warn: ansi(33), faint: ansi(2) }
    : { good: plain, bad: plain, warn: plain, faint: plain };

const count = (n: number, one: string, many = `${one}s`): string => `${n.toLocaleString("en")} ${n === 1 ? one : many}`;

/** `; 3 probes: 2 agree, 1 disagrees`, or nothing where there are none. */
function probesInWords({ agrees, disagrees, unresolved, invalid }: SummaryCounts["probes"]): string {
  const all = agrees + disagrees + unresolved + invalid;
  if (all === 0) return "";
  const parts = [
    count(agrees, "agrees", "agree"),
    ...(disagrees > 0 ? [count(disagrees, "disagrees", "disagree")] : []),
    ...(invalid > 0 ? [`${invalid.toLocaleString("en")} invalid`] : []),
    ...(unresolved > 0 ? [`${unresolved.toLocaleString("en")} unresolved`] : []),
  ];
  return `; ${count(all, "probe")}: ${parts.join(", ")}`;
}

/** `7 blocks, 812 entries: 800 agree, 3 disagree, 9 unresolved; 2 probes: 2 agree`. */
export function sumInWords(summary: SummaryCounts): string {
  const { blocks, entries, agrees, disagrees, unresolved, unreferenced, invalid } = summary;
  const parts = [
    count(agrees, "agrees", "agree"),
    ...(disagrees > 0 ? [count(disagrees, "disagrees", "disagree")] : []),
    ...(invalid > 0 ? [`${invalid.toLocaleString("en")} invalid`] : []),
    ...(unresolved > 0 ? [`${unresolved.toLocaleString("en")} unresolved`] : []),
    ...(unreferenced > 0 ? [`${unreferenced.toLocaleString("en")} unreferenced`] : []),
  ];
  const sum = `${count(blocks, "block")}, ${count(entries, "entry", "entries")}: ${parts.join(", ")}`;
  return sum + probesInWords(summary.probes);
}

/** Twelve digits of the hash, and the subject where the posting told it. */
function nameOf(commits: ReadonlyMap<string, CommitDocument>, sha: string): string {
  const subject = commits.get(sha)?.subject;
  return subject ? `${sha.slice(0, 12)} "${subject}"` : sha.slice(0, 12);
}

/** The verdict as lines for a CI log. `known` are commits whose subjects may be told. */
export function verdictLines(
  { build, summary, gate, breaks }: PostedBuild,
  told: { readonly project: string; readonly dryRun: boolean; readonly known: readonly CommitDocument[] },
  { good, bad, warn, faint }: Paint,
): string[] {
  const commits = new Map(told.known.map((commit) => [commit.sha, commit]));
  const name = (sha: string) => nameOf(commits, sha);
  const lines = [`${told.project}, lane ${build.lane}, commit ${name(build.commit)}`, `  ${sumInWords(summary)}`];
  for (const { state, onset, url } of breaks) {
    const word = state === "open" ? bad("break") : state === "repaired" ? good("repaired") : warn("waived");
    lines.push(`  ${word} begun by ${name(onset)}`, `    ${url}`);
  }
  for (const { severity, code, message } of gate.reasons) {
    lines.push(`  ${severity === "fail" ? bad("fail") : warn("warn")} ${code}: ${message}`);
  }
  lines.push(`  ${decisionInWords()}`);
  lines.push(`  ${told.dryRun ? "a dry run: nothing was kept" : build.url}`, faint(CAUTION));
  return lines;

  function decisionInWords(): string {
    const against = gate.base === null ? "" : `, compared with ${name(gate.base)}`;
    if (build.state === "receiving") return warn("received; the last shard of the build brings the verdict");
    if (gate.decision === "pass") return `${good("gate passes")}${against}`;
    if (gate.decision === "fail") return `${bad("gate FAILS")}${against}`;
    return warn(gate.decision === "wait" ? "the gate is waiting" : "the gate does not know this commit yet");
  }
}
