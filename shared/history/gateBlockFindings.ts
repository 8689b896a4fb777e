import { gateProbeFindings } from "./gateProbeFindings.ts";
import type { GateBlock, GateFinding, GateInput } from "./types.ts";

/**
 * What blocks lost against the base: blocks that vanished, entries that lost their reference, entries that their
 * reference cannot tell any more. A block that is new is found only if it has no reference at all; without a base
 * every block is new. Probes are told as in `gateProbeFindings`.
 */
export function gateBlockFindings(input: Pick<GateInput, "head" | "baseBlocks" | "base">): GateFinding[] {
  const base = input.base === null ? "the base" : input.base.slice(0, 12);
  const jacobians = (blocks: readonly GateBlock[]) => blocks.filter(({ probe }) => !probe);
  const present = new Set(input.head.map((block) => block.blockId));
  const before = new Map(input.baseBlocks.map((block) => [block.blockId, block]));
  const missing = jacobians(input.baseBlocks)
    .filter((block) => !present.has(block.blockId))
    .map((block) =>
      finding("block-missing", block, block.entries, `${named(block)} was posted at ${base} and is missing here`),
    );
  const lost = jacobians(input.head).flatMap((block) => {
    const then = before.get(block.blockId);
    if (then === undefined) return newBlock(block);
    return [...reference(block, then, base), ...resolution(block, then, base)];
  });
  return [...missing, ...lost, ...gateProbeFindings(input, base)];
}

function newBlock(block: GateBlock): GateFinding[] {
  if (block.entries === 0 || block.unreferenced < block.entries) return [];
  return [finding("reference-missing", block, block.entries, `${named(block)} is new and has no reference`)];
}

function reference(block: GateBlock, then: GateBlock, base: string): GateFinding[] {
  const more = block.unreferenced - then.unreferenced;
  if (more <= 0) return [];
  const text = `${entriesOf(more)} of ${named(block)} lost ${more === 1 ? "its" : "their"} reference since ${base}`;
  return [finding("reference-missing", block, more, `${text} (${block.unreferenced} of ${block.entries} have none)`)];
}

function resolution(block: GateBlock, then: GateBlock, base: string): GateFinding[] {
  const more = block.unresolved - then.unresolved;
  if (more <= 0) return [];
  const text = `${more === 1 ? "one more entry" : `${more} more entries`} of ${named(block)}`;
  const message = `${text} ${more === 1 ? "is" : "are"} unresolved than at ${base} (${block.unresolved} of ${block.entries})`;
  return [finding("resolution-lost", block, more, message)];
}

function finding(code: GateFinding["code"], block: GateBlock, weight: number, message: string): GateFinding {
  return { code, message, weight, model: block.model, block: block.block };
}

function named(block: GateBlock): string {
  return `${block.model}, ${block.block}`;
}

function entriesOf(count: number): string {
  return count === 1 ? "one entry" : `${count} entries`;
}
