import type { GateBlock, GateFinding, GateInput } from "./types.ts";

/** The block that probes are of, by its names. */
export function probedKey({ model, block }: GateBlock): string {
  return JSON.stringify([model, block]);
}

/**
 * What became of the probes of the base, block by block: told only where all probes of a block are gone, as jobs may draw
 * other probes for each build. A block whose Jacobian is here has lost a reference (`reference-missing`); one that was
 * only probed and of which nothing is here is missing itself (`block-missing`); where a Jacobian vanished with its
 * probes, that is told already.
 */
export function gateProbeFindings(input: Pick<GateInput, "head" | "baseBlocks">, base: string): GateFinding[] {
  const isProbe = (block: GateBlock) => Boolean(block.probe);
  const probedHere = new Set(input.head.filter(isProbe).map(probedKey));
  const jacobiansHere = new Set(input.head.filter((block) => !isProbe(block)).map(probedKey));
  const jacobiansThen = new Set(input.baseBlocks.filter((block) => !isProbe(block)).map(probedKey));
  const gone = new Map<string, GateBlock[]>();
  for (const block of input.baseBlocks) {
    const key = probedKey(block);
    if (!isProbe(block) || probedHere.has(key)) continue;
    if (jacobiansThen.has(key) && !jacobiansHere.has(key)) continue;
    gone.set(key, [...(gone.get(key) ?? []), block]);
  }
  return [...gone].map(([key, probes]) => {
    const { model, block } = probes[0]!;
    const told = { model, block, weight: probes.length };
    const name = `${model}, ${block}`;
    if (!jacobiansHere.has(key)) {
      return { ...told, code: "block-missing", message: `${name} was probed at ${base} and is missing here` };
    }
    const what = probes.length === 1 ? `probe ${probes[0]!.probe!.name}` : `all ${probes.length} probes`;
    const are = probes.length === 1 ? "is" : "are";
    return { ...told, code: "reference-missing", message: `${what} of ${name} ${are} missing since ${base}` };
  });
}
