import { jacobianKey } from "../../shared/domain/selector.ts";
import type { BlockName } from "../../shared/domain/selector.ts";
import type { Verdict } from "../../shared/domain/vocabulary.ts";
import type { VerdictCounts } from "../../shared/numerics/types.ts";
import type { ProbeCounts, SummaryCounts } from "../../shared/schemas/build.ts";
import { fromWire } from "../../shared/schemas/common.ts";
import type { Reader } from "../db/reader.ts";
import type { Writer } from "../db/write.ts";
import type { StoredWorst } from "../ingest/judgePosting.ts";
import { COUNTS_SQL, JOIN_COVERAGE } from "./countsSql.ts";

/** JSON of a complete build's `summary` column: what lists and the strip show of it without reading its blocks. */
export interface BuildSummary {
  readonly counts: SummaryCounts;
  /** The worst entry over all blocks. */
  readonly worst: (StoredWorst & { readonly blockId: number }) | null;
}

/** A judged block as sums are made of it. */
export interface SummedBlock extends VerdictCounts, BlockName {
  readonly blockId: number;
  /** Entries whose verdict is that of an earlier build. */
  readonly carried: number;
  /** JSON: StoredWorst, or null. */
  readonly worst: string | null;
}

/** Adds up the blocks that a build has so far; of equally bad entries the first by its block's names is the worst. */
export async function sumUpBuild(reader: Reader, buildId: number): Promise<BuildSummary> {
  const blocks = await reader.select<SummedBlock>(
    `SELECT bb.blockId, b.model, b.point, b.output, b.input, b.probe, ${COUNTS_SQL}, s.worst
     FROM build_blocks bb JOIN snapshots s ON s.id = bb.snapshotId JOIN blocks b ON b.id = bb.blockId ${JOIN_COVERAGE}
     WHERE bb.buildId = $1 ORDER BY b.model, b.output, b.input, b.point, b.probe`,
    [buildId],
  );
  const worst = worstOf(blocks);
  return { counts: addUp(blocks), worst: worst && { ...worst.entry, blockId: worst.block.blockId } };
}

/** The summary of the record, or what a build that is still receiving has so far. */
export async function summaryOf(
  reader: Reader,
  build: { readonly id: number; readonly summary: string | null },
): Promise<BuildSummary> {
  return build.summary === null ? sumUpBuild(reader, build.id) : readSummary(build.summary);
}

/** What was stored before entries were carried, or probes counted, has none. */
export function readSummary(stored: string): BuildSummary {
  const { counts, worst } = JSON.parse(stored) as BuildSummary;
  return { counts: wholeCounts(counts), worst };
}

/** Counts as they were stored or answered once, with all that is counted by now. */
export function wholeCounts(counts: SummaryCounts): SummaryCounts {
  return { ...counts, carried: counts.carried ?? 0, probes: counts.probes ?? countProbes([]) };
}

/** Entries are those of Jacobians; a Jacobian counts as one block with its probes, and so do probes that have none. */
export function addUp(
  blocks: readonly (VerdictCounts & Pick<SummedBlock, "carried" | keyof BlockName>)[],
): SummaryCounts {
  const jacobians = blocks.filter(({ probe }) => probe === "");
  const sum = (name: keyof VerdictCounts | "carried") => jacobians.reduce((total, block) => total + block[name], 0);
  return {
    blocks: new Set(blocks.map(jacobianKey)).size,
    entries: sum("entries"),
    agrees: sum("agrees"),
    disagrees: sum("disagrees"),
    unresolved: sum("unresolved"),
    unreferenced: sum("unreferenced"),
    invalid: sum("invalid"),
    carried: sum("carried"),
    probes: countProbes(blocks.filter(({ probe }) => probe !== "")),
  };
}

/** Each probe counts once, by the worst of its verdicts. */
function countProbes(probes: readonly VerdictCounts[]): ProbeCounts {
  const counts = { agrees: 0, disagrees: 0, unresolved: 0, invalid: 0 };
  for (const probe of probes) {
    const worst = (["invalid", "disagrees", "unresolved"] as const).find((verdict) => probe[verdict] > 0);
    // Of a directional derivative that has holes nothing more is known.
    counts[worst ?? (probe.unreferenced > 0 ? "unresolved" : "agrees")] += 1;
  }
  return counts;
}

/** The worst entry of several blocks, the first of equal ones; null where none has an entry. */
export function worstOf<B extends Pick<SummedBlock, "worst">>(
  blocks: readonly B[],
): { readonly block: B; readonly entry: StoredWorst } | null {
  let worst: { readonly block: B; readonly entry: StoredWorst } | null = null;
  for (const block of blocks) {
    if (block.worst === null) continue;
    const entry = JSON.parse(block.worst) as StoredWorst;
    if (worst === null || isWorse(entry, worst.entry)) worst = { block, entry };
  }
  return worst;
}

export async function storeSummary(w: Writer, buildId: number): Promise<void> {
  await w.run("UPDATE builds SET summary = $2 WHERE id = $1", [buildId, JSON.stringify(await sumUpBuild(w, buildId))]);
}

/** Worst verdict first. */
const GRAVITY: readonly Verdict[] = ["invalid", "disagrees", "unresolved", "agrees", "unreferenced"];

/** Orders entries by verdict, then by relative error; what has no error goes before what has one. */
export function isWorse(a: StoredWorst, b: StoredWorst): boolean {
  if (a.verdict !== b.verdict) return GRAVITY.indexOf(a.verdict) < GRAVITY.indexOf(b.verdict);
  const size = (worst: StoredWorst) => (worst.error === null ? Infinity : fromWire(worst.error));
  return size(a) > size(b);
}

/** The worst verdict that occurs, of entries and of probes; null where there is neither. */
export function worstVerdict(counts: Pick<SummaryCounts, Verdict | "probes">): Verdict | null {
  const probed = (verdict: Verdict) => verdict !== "unreferenced" && counts.probes[verdict] > 0;
  return GRAVITY.find((verdict) => counts[verdict] > 0 || probed(verdict)) ?? null;
}

/** Share of the entries that have a reference, 0..1; null of no entries. */
export function checkedShare(counts: SummaryCounts): number | null {
  return counts.entries === 0 ? null : 1 - counts.unreferenced / counts.entries;
}
