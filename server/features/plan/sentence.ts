import type { PlanReason } from "../../../shared/domain/vocabulary.ts";
import { countInWords } from "../breaks/sentence.ts";
import type { KnownColumn } from "./columnFacts.ts";

type Members = readonly KnownColumn[];

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);
const sum = (members: Members, of: (column: KnownColumn) => number) => members.reduce((all, one) => all + of(one), 0);

function passed(builds: number): string {
  return builds === 1 ? "One build has passed" : `${capital(countInWords(builds))} builds have passed`;
}

const SENTENCE: Record<PlanReason, (members: Members, limit: number) => string> = {
  "open-break": (members) => {
    const entries = sum(members, (one) => one.broken?.entries ?? 0);
    const numbers = [...new Set(members.flatMap((one) => one.broken?.numbers ?? []))].sort((a, b) => a - b);
    const many = entries === 1 ? "entry is" : "entries are";
    return `${capital(countInWords(entries))} ${many} in open ${numbers.length === 1 ? "break" : "breaks"} ${numbers.join(", ")}.`;
  },
  climb: (members) => {
    const decades = members.reduce((most, one) => Math.max(most, one.climb), 0);
    return `The error climbs, by ${decades.toFixed(1)} decades so far.`;
  },
  "source-changed": ([{ clue }]) => `Commit ${clue?.sha.slice(0, 7)} ${clue?.why}, after the last check.`,
  "never-checked": ([{ waited }]) =>
    waited === 0 ? "Posted for the first time and not checked." : `${passed(waited)} without any check.`,
  "near-limit": ([{ waited }], limit) =>
    `${passed(waited)} since the last check; after ${countInWords(limit)} it counts as unreferenced.`,
  unresolved: (members) => {
    const entries = sum(members, (one) => one.unresolved);
    const all = sum(members, (one) => one.named.rows);
    return `The last check could not resolve ${countInWords(entries)} of ${countInWords(all)} entries.`;
  },
  rotation: ([{ waited }]) =>
    waited === 0
      ? "Its turn, though the newest build checked it."
      : `${passed(waited)} since the last check: its turn.`,
};

/** Why columns of a block that share their reason and their last check are worth checking. */
export function reasonSentence(reason: PlanReason, members: Members, limit: number): string {
  return SENTENCE[reason](members, limit);
}
