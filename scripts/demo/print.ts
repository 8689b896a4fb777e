import type { Climb, Finding } from "./findings.ts";
import type { DemoCommit } from "./history/history.ts";
import { ADMINISTRATOR, DEMO_MEMBERS, DEMO_PASSWORD } from "./people.ts";

const short = (sha: string) => sha.slice(0, 8);

/** Columns as wide as their longest cell, two spaces apart. */
function table(rows: readonly (readonly string[])[]): string[] {
  const widths = rows[0]!.map((_, column) => Math.max(...rows.map((row) => row[column]!.length)));
  return rows.map((row) =>
    row
      .map((cell, column) => cell.padEnd(widths[column]!))
      .join("  ")
      .trimEnd(),
  );
}

/** Every planted mistake, the commit that it was planted in, and the one that the server named. */
export function findingLines(found: readonly Finding[], climb: Climb | null): string[] {
  const rows = found.map(({ planted, commit, named, how, right }) => [
    planted.what,
    planted.model,
    short(commit.commit.sha),
    named === null ? "none" : short(named),
    right ? "right" : "WRONG",
    how,
  ]);
  const right = found.filter((finding) => finding.right).length;
  const lines = [
    ...table([["planted mistake", "where", "planted in", "named", "", "how it is told"], ...rows]),
    "",
    `${right} of ${found.length} planted mistakes are named by their commit.`,
  ];
  if (climb !== null) {
    const { toldBy, onset, buildsBefore, decades, builds } = climb;
    lines.push(
      `The loosened solve was told as a climb that began at ${short(onset)} by the build of ${short(toldBy)}, ` +
        `${buildsBefore} builds before it became a break; by now ${decades.toFixed(1)} decades in ${builds} builds.`,
    );
  }
  return lines;
}

export function scenarioLine(history: readonly DemoCommit[]): string {
  const builds = history.reduce((sum, { lanes }) => sum + lanes.length, 0);
  return `Posting the history of an invented tidal turbine's design code: ${history.length} commits, ${builds} builds.`;
}

/** Where to look, and as whom. */
export function accountLines(url: string): string[] {
  const accounts = [...DEMO_MEMBERS.map(({ email, role }) => [role, email]), ["administrator", ADMINISTRATOR.email]];
  return [
    `Open ${url} and sign in, with the password "${DEMO_PASSWORD}", as`,
    ...table(accounts as string[][]).map((line) => `  ${line}`),
  ];
}
