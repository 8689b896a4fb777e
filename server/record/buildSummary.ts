import type { Verdict } from "../../shared/domain/vocabulary.ts";
import type { VerdictCounts } from "../../shared/numerics/types.ts";
import type { SummaryCounts } from "../../shared/schemas/build.ts";
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
export interface SummedBlock extends VerdictCounts {
  readonly blockId: number;
  /** Entries whose verdict is that of an earlier build. */
  readonly carried: number;
  /** JSON: StoredWorst, or null. */
  readonly worst: string | null;
}

/** Adds up the blocks that a build has so far; of equally bad entries the first by its block's names is the worst. */
export async function sumUpBuild(reader: Reader, buildId: number): Promise<BuildSummary> {
  const blocks = await reader.select<SummedBlock>(
    `SELECT bb.blockId, ${COUNTS_SQL}, s.worst
     FROM build_blocks bb JOIN snapshots s ON s.id = bb.snapshotId JOIN blocks b ON b.id = bb.blockId ${JOIN_COVERAGE}
     WHERE bb.buildId = $1 ORDER BY b.model, b.output, b.input, b.point`,
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

/** What was stored before entries were carried has none that are. */
export function readSummary(stored: string): BuildSummary {
  const { counts, worst } = JSON.parse(stored) as BuildSummary;
  return { counts: { ...counts, carried: counts.carried ?? 0 }, worst };
}

export function addUp(blocks: readonly (VerdictCounts & Pick<SummedBlock, "carried">)[]): SummaryCounts {
  const sum = (name: keyof VerdictCounts | "carried") => blocks.reduce((total, block) => total + block[name], 0);
  return {
    blocks: blocks.length,
    entries: sum("entries"),
    agrees: sum("agrees"),
    disagrees: sum("disagrees"),
    unresolved: sum("unresolved"),
    unreferenced: sum("unreferenced"),
    invalid: sum("invalid"),
    carried: sum("carried"),
  };
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

/** The worst verdict that occurs, or null of no entries. */
export function worstVerdict(counts: Pick<SummaryCounts, Verdict>): Verdict | null {
  return GRAVITY.find((verdict) => counts[verdict] > 0) ?? null;
}

/** Share of the entries that have a reference, 0..1; null of no entries. */
export function checkedShare(counts: SummaryCounts): number | null {
  return counts.entries === 0 ? null : 1 - counts.unreferenced / counts.entries;
}
