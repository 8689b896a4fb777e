import type { BlockRow } from "../../shared/schemas/block.ts";
import type { BuildRow, Counts } from "../../shared/schemas/build.ts";
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

/** What a block came to: `rotor.thrust disagrees in three entries of 18.` */
export const blockSentence = (block: Pick<BlockRow, "model" | "counts">) => `${block.model} ${outcome(block.counts)}.`;

/** What a build came to, as a headline. */
export function buildSentence(build: Pick<BuildRow, "state" | "summary" | "shards">): string {
  if (build.state === "receiving") {
    return `${capitalised(countWords(build.shards.missing.length, "shard"))} of ${build.shards.expected} ${build.shards.missing.length === 1 ? "is" : "are"} still to come.`;
  }
  return `The build ${outcome(build.summary)}.`;
}
