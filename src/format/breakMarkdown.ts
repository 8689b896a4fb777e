import type { BreakDetail, BreakEntry } from "../../shared/schemas/break.ts";
import { CAUTION } from "../../shared/domain/vocabulary.ts";
import { numberText } from "./number.ts";
import { elementName, elsewhere, MOTION_SENTENCE, shortSha } from "./words.ts";

type Side = Parameters<typeof elementName>[0];
export type EntryNames = ReadonlyMap<string, { readonly output: Side; readonly input: Side }>;

/**
 * Name of an entry: `spring ebb by pitch` where its elements have names, else `thrust[2] by blade[0]`; of a probe
 * `probe dot-product: seed 7 of thrust by blade`, of a directional one with the element.
 */
export function entryName(
  entry: Pick<BreakEntry, "blockId" | "output" | "input" | "row" | "column" | "probe">,
  names?: EntryNames,
): string {
  const sides = names?.get(entry.blockId);
  if (entry.probe !== null) {
    const element = sides ? elementName(sides.output, entry.row) : `${entry.output}[${entry.row}]`;
    const output = entry.probe.startsWith("directional") ? element : entry.output;
    return `probe ${entry.probe} of ${output} by ${entry.input}`;
  }
  if (!sides) return `${entry.output}[${entry.row}] by ${entry.input}[${entry.column}]`;
  return `${elementName(sides.output, entry.row)} by ${elementName(sides.input, entry.column)}`;
}

const WORST = { invalid: Number.POSITIVE_INFINITY } as const;
const weight = (entry: BreakEntry) =>
  entry.verdict === "invalid" ? WORST.invalid : Number(entry.error ?? Number.NEGATIVE_INFINITY);
export function worstFirst(entries: readonly BreakEntry[]): BreakEntry[] {
  return [...entries].sort((a, b) => (weight(b) === weight(a) ? 0 : weight(b) - weight(a)));
}

const cell = (text: string) => text.replaceAll("|", "\\|").replace(/\s+/g, " ");

/** A break for an issue tracker or a message: what, who moved, which commit, and where to look. */
export function breakMarkdown(record: BreakDetail, address: string, names?: EntryNames): string {
  const rows = worstFirst(record.entries)
    .slice(0, 10)
    .map(
      (e) =>
        `| ${cell(e.model)} | ${cell(entryName(e, names))} | ${e.derivative} | ${e.reference ?? "none"} | ${e.error === null ? "none" : numberText(e.error)} | ${e.before?.derivative ?? "none"} |`,
    );
  const more = record.entryCount > rows.length ? [``, `and ${record.entryCount - rows.length} more entries.`] : [];
  const suspects = record.suspects.map(
    (s) =>
      `- \`${shortSha(s.commit)}\` ${s.subject ?? ""}${s.author ? `, ${s.author}` : ""}${s.why.length > 0 ? ` (${s.why.join("; ")})` : ""}`,
  );
  const signature = record.signatures[0];
  return [
    `### ${elsewhere(record.sentence)}`,
    ``,
    `[Break ${record.number}](${address}) in lane ${record.lane}, since \`${shortSha(record.onset.commit)}\`.`,
    ...(signature ? [``, `**${signature.detail}**`] : []),
    ...(record.motion ? [``, MOTION_SENTENCE[record.motion]] : []),
    ``,
    `| model | entry | derivative | reference | relative error | derivative before |`,
    `| --- | --- | --- | --- | --- | --- |`,
    ...rows,
    ...more,
    ``,
    `Suspects:`,
    ...suspects,
    ...(record.nextTest
      ? [``, `Next test: \`${shortSha(record.nextTest.commit)}\` leaves at most ${record.nextTest.remainingAfter}.`]
      : []),
    ``,
    `_${CAUTION}_`,
    ``,
  ].join("\n");
}
