import type { BlockRow, ProbeResult } from "../../shared/schemas/block.ts";
import type { ProbeKind, Verdict } from "../../shared/domain/vocabulary.ts";
import { VERDICTS_LOUDEST_FIRST } from "./words.ts";

export const PROBE_WORD: Record<ProbeKind, string> = {
  "dot-product": "dot product",
  taylor: "Taylor remainder",
  directional: "directional",
};

const loudness = (verdict: Verdict) => VERDICTS_LOUDEST_FIRST.indexOf(verdict);

/** What needs a person first, then by error; those that are alike stay in order. */
export function probesLoudestFirst(probes: readonly ProbeResult[]): ProbeResult[] {
  const size = ({ error }: ProbeResult) => (error === null ? Infinity : Number(error));
  return [...probes].sort((a, b) => {
    if (a.verdict !== b.verdict) return loudness(a.verdict) - loudness(b.verdict);
    return size(a) === size(b) ? 0 : size(b) - size(a);
  });
}

/** A Jacobian of a build with its probes, or probes that have none. */
export interface BlockGroup {
  readonly key: string;
  /** Null where a block was probed only. */
  readonly jacobian: BlockRow | null;
  /** Loudest first. */
  readonly probes: readonly BlockRow[];
  /** The row that the group is called and sorted by. */
  readonly named: BlockRow;
  /** Place of its loudest verdict among all, the loudest being 0; -1 of no entries. */
  readonly loudness: number;
}

const loudnessOf = (row: BlockRow) => VERDICTS_LOUDEST_FIRST.findIndex((verdict) => row.counts[verdict] > 0);

/** The blocks of a build with the probes under what they probe, in the order in which their first rows come. */
export function groupBlocks(rows: readonly BlockRow[]): BlockGroup[] {
  const groups = new Map<string, BlockRow[]>();
  for (const row of rows) {
    const key = JSON.stringify([row.model, row.point, row.output.name, row.input.name]);
    const members = groups.get(key);
    if (members) members.push(row);
    else groups.set(key, [row]);
  }
  return [...groups].map(([key, members]) => {
    const jacobian = members.find((row) => row.probe === null) ?? null;
    const probes = members.filter((row) => row.probe !== null).sort((a, b) => loudnessOf(a) - loudnessOf(b));
    const known = members.map(loudnessOf).filter((place) => place >= 0);
    return {
      key,
      jacobian,
      probes,
      named: jacobian ?? probes[0]!,
      loudness: known.length === 0 ? -1 : Math.min(...known),
    };
  });
}
