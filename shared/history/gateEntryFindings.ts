import type { GateBlock, GateEntry, GateFinding, GateInput } from "./types.ts";

type EntryCode = "new-break" | "invalid-values" | "worse-than-waiver" | "probe-failed";

/**
 * Bad entries that are new against the base, one finding for each break (or block, where no break is known) and code;
 * of probes one for each, `probe-failed`.
 * What is not finite is never within a waiver's bound, as a bound says nothing of it. An entry beyond its waiver is
 * found even if it was bad at the base, unless it was beyond the bound there as well.
 */
export function gateEntryFindings(input: Pick<GateInput, "bad" | "head" | "base">): GateFinding[] {
  const blocks = new Map(input.head.map((block) => [block.blockId, block]));
  const groups = new Map<string, { code: EntryCode; entries: GateEntry[] }>();
  for (const entry of input.bad) {
    const code = codeOf(entry, blocks.get(entry.blockId));
    if (code === null) continue;
    const together = code === "probe-failed" ? null : entry.breakId;
    const key = `${code} ${together ?? `block ${entry.blockId}`}`;
    const group = groups.get(key);
    if (group) group.entries.push(entry);
    else groups.set(key, { code, entries: [entry] });
  }
  return [...groups.values()].map(({ code, entries }) => finding(code, entries.sort(worstFirst), blocks, input.base));
}

function codeOf(entry: GateEntry, block: GateBlock | undefined): EntryCode | null {
  const code = entryCodeOf(entry);
  return block?.probe && (code === "new-break" || code === "invalid-values") ? "probe-failed" : code;
}

function entryCodeOf(entry: GateEntry): EntryCode | null {
  if (entry.verdict === "invalid") return entry.badAtBase ? null : "invalid-values";
  const bound = entry.waivedUpTo;
  if (bound === null) return entry.badAtBase ? null : "new-break";
  // What was not checked again was within its bound when it was, or found then.
  if (entry.error <= bound || entry.carried) return null;
  const notNew = entry.badAtBase && (entry.errorAtBase ?? 0) > bound;
  return notNew ? null : "worse-than-waiver";
}

function finding(
  code: EntryCode,
  entries: readonly GateEntry[],
  blocks: ReadonlyMap<string, GateBlock>,
  base: string | null,
): GateFinding {
  const worst = entries[0]!;
  const block = blocks.get(worst.blockId);
  return {
    code,
    message: message(code, entries, block, base),
    weight: magnitude(worst),
    ...(block ? { model: block.model, block: block.block } : {}),
    row: worst.row,
    column: worst.column,
    ...(worst.breakId === null ? {} : { breakId: worst.breakId }),
  };
}

function message(code: EntryCode, entries: readonly GateEntry[], block: GateBlock | undefined, base: string | null) {
  if (code === "probe-failed" && block?.probe) return probeMessage(block, block.probe, base);
  const worst = entries[0]!;
  const one = entries.length === 1;
  const blockCount = new Set(entries.map((entry) => entry.blockId)).size;
  const probe = block?.probe ? `probe ${block.probe.name} of ` : "";
  const name = block ? `${probe}${block.model}, ${block.block}` : "a block";
  const what = one ? "one entry" : `${entries.length} entries`;
  const where = blockCount > 1 ? `${what} in ${blockCount} blocks, among them ${name},` : `${what} of ${name}`;
  const at = `row ${worst.row}, column ${worst.column}`;
  const error = worst.carried ? "as last checked" : `relative error ${worst.error.toPrecision(2)}`;
  const since = base === null ? "" : ` and ${one ? "was" : "were"} not so at ${base.slice(0, 12)}`;
  if (code === "invalid-values")
    return `${where} ${one ? "is no finite number" : "are no finite numbers"}${since} (${at})`;
  if (code === "new-break") {
    return `${where} ${one ? "disagrees with its" : "disagree with their"} reference${since} (${one ? "" : "worst: "}${at}, ${error})`;
  }
  const bound = `${at}, ${error}, waived up to ${worst.waivedUpTo!.toPrecision(2)}`;
  return `${where} ${one ? "is worse than its waiver allows" : "are worse than their waivers allow"} (${one ? "" : "worst: "}${bound})`;
}

function probeMessage(block: GateBlock, probe: NonNullable<GateBlock["probe"]>, base: string | null): string {
  const since = base === null ? "failed" : `failed and did not at ${base.slice(0, 12)}`;
  return `probe ${probe.name} of ${block.model}, ${block.block} ${since}: ${probe.sentence}`;
}

/** What is not finite is worse than any number; what was not checked again has none. */
function magnitude(entry: GateEntry): number {
  if (entry.carried) return 0;
  return Number.isFinite(entry.error) ? entry.error : Infinity;
}

function worstFirst(a: GateEntry, b: GateEntry): number {
  const [errorA, errorB] = [magnitude(a), magnitude(b)];
  if (errorA !== errorB) return errorA > errorB ? -1 : 1;
  if (a.blockId !== b.blockId) return a.blockId < b.blockId ? -1 : 1;
  return a.row - b.row || a.column - b.column;
}
