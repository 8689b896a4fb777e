import type { StripColumn } from "../../shared/schemas/commit.ts";
import { numberText } from "./number.ts";
import { shortSha, verdictCounts } from "./words.ts";

/** What a commit of the strip came to, in a phrase. */
export function columnVerdict(column: StripColumn): string {
  if (column.buildId === null) return "nothing was posted";
  if (column.state === "receiving") return "still receiving shards";
  if (column.counts === null) return column.verdict ?? "not judged";
  const worst = column.worstError === null ? "" : `, worst ${numberText(column.worstError)}`;
  const counts = verdictCounts(column.counts).map((count) => count.text);
  return [...probeVerdict(column), ...counts].join(", ").concat(worst);
}

/** The probe that is the worst of its build, where it does not agree. */
function probeVerdict({ worst, verdict }: StripColumn): string[] {
  return worst?.probe && verdict !== "agrees" ? [`probe ${worst.probe} of ${worst.model} ${verdict}`] : [];
}

/** A commit of the strip in one line: sha, subject, author, what was found. */
export function columnText(column: StripColumn): string {
  const who = column.author === null ? "" : `, ${column.author}`;
  const subject = column.subject === null ? "" : ` “${column.subject}”`;
  return `${shortSha(column.commit)}${subject}${who}: ${columnVerdict(column)}`;
}
