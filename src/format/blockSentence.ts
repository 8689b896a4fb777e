import type { BlockRow } from "../../shared/schemas/block.ts";
import type { BuildRow, Counts, ProbeCounts } from "../../shared/schemas/build.ts";
import { capitalised, countText, countWords } from "./number.ts";

function outcome({ entries, agrees, disagrees, invalid, unresolved, unreferenced }: Counts): string {
  if (entries === 0) return "has no entries";
  if (invalid > 0) return `has ${countWords(invalid, "entry that is", "entries that are")} not a finite number`;
  if (disagrees > 0) return `disagrees in ${countWords(disagrees, "entry", "entries")} of ${countText(entries)}`;
  if (agrees === entries) return "agrees in every entry";
  if (unreferenced === entries) return "has no reference to judge it by";
  if (unresolved > 0) return `has ${countWords(unresolved, "entry", "entries")} that the references cannot decide`;
  return "agrees wherever there is a reference";
}

function probeOutcome({ entries, agrees, disagrees, invalid }: Counts): string {
  if (invalid > 0) return "is not a finite number";
  if (disagrees > 0) return "disagrees";
  return agrees === entries ? "agrees" : "cannot tell at this tolerance";
}

/** What a block came to: `rotor.thrust disagrees in three entries of 18.`, `Probe taylor: 1 of rotor.thrust agrees.` */
export function blockSentence({ model, counts, probe }: Pick<BlockRow, "model" | "counts" | "probe">): string {
  return probe === null ? `${model} ${outcome(counts)}.` : `Probe ${probe} of ${model} ${probeOutcome(counts)}.`;
}

/** Probes that say no, or whatever they say where there is nothing else: `one probe of 3 disagrees`. */
function probesOutcome({ agrees, disagrees, unresolved, invalid }: ProbeCounts, alone: boolean): string | null {
  const all = agrees + disagrees + unresolved + invalid;
  const failed = disagrees + invalid;
  if (failed > 0)
    return `${countWords(failed, "probe")} of ${countText(all)} ${failed === 1 ? "disagrees" : "disagree"}`;
  if (!alone || all === 0) return null;
  if (unresolved > 0) return `${countWords(unresolved, "probe")} of ${countText(all)} cannot tell`;
  return all === 1 ? "its one probe agrees" : `all of its ${countText(all)} probes agree`;
}

/** What a build came to, as a headline. */
export function buildSentence(build: Pick<BuildRow, "state" | "summary" | "shards">): string {
  if (build.state === "receiving") {
    return `${capitalised(countWords(build.shards.missing.length, "shard"))} of ${build.shards.expected} ${build.shards.missing.length === 1 ? "is" : "are"} still to come.`;
  }
  const { summary } = build;
  const probes = probesOutcome(summary.probes, summary.entries === 0);
  return probes === null ? `The build ${outcome(summary)}.` : `The build ${outcome(summary)}; ${probes}.`;
}
