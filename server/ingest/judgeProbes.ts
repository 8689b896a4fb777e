import type { BlockName } from "../../shared/domain/selector.ts";
import type { Tolerances } from "../../shared/domain/tolerances.ts";
import { fromWire } from "../../shared/schemas/common.ts";
import type { PostedProbe } from "../../shared/schemas/build.ts";
import { judgeDirectional } from "../../shared/numerics/probes/judgeDirectional.ts";
import { judgeDotProduct } from "../../shared/numerics/probes/judgeDotProduct.ts";
import { judgeTaylor } from "../../shared/numerics/probes/judgeTaylor.ts";
import { probeBlock } from "../../shared/numerics/probes/probeBlock.ts";
import { detailsOf, hashedDetails } from "./blockDetails.ts";
import type { BlockDetails } from "./blockDetails.ts";
import { cutBlock } from "./cutBlock.ts";
import type { JudgedPostedBlock } from "./judgePosting.ts";
import { directionalDetails, dotProductDetails, taylorDetails } from "./probeDetails.ts";
import { probeNames } from "./probeNames.ts";
import type { NamedProbe } from "./probeNames.ts";
import type { SkeletonBlock } from "./skeleton.ts";
import type { TileSet } from "./tileSet.ts";

type Probe<K extends PostedProbe["kind"]> = Extract<PostedProbe, { kind: K }>;
type Cut = Pick<JudgedPostedBlock, "snapshot" | "details" | "detailsHash">;

/** What the probes of a block are judged with beside their own numbers. */
interface Parent {
  readonly block: SkeletonBlock;
  readonly outputValues: Float64Array | null;
  readonly tolerances: Tolerances;
  readonly tiles: TileSet;
}

/** Judges the probes of a block: each becomes a block beside that of the Jacobian, if there is one. */
export function judgeProbes(
  block: SkeletonBlock,
  name: BlockName,
  outputValues: Float64Array | null,
  tolerances: Tolerances,
  tiles: TileSet,
): JudgedPostedBlock[] {
  const parent = { block, outputValues, tolerances, tiles };
  return probeNames(block.probes).map((named) => ({ ...name, probe: named.name, costs: null, ...cut(named, parent) }));
}

function cut({ probe, label }: NamedProbe, parent: Parent): Cut {
  switch (probe.kind) {
    case "dot-product":
      return cutDotProduct(probe, label, parent);
    case "taylor":
      return cutTaylor(probe, label, parent);
    case "directional":
      return cutDirectional(probe, label, parent);
  }
}

function cutDotProduct(probe: Probe<"dot-product">, label: string, { block, tolerances, tiles }: Parent): Cut {
  const judged = judgeDotProduct({
    forward: fromWire(probe.forward),
    reverse: fromWire(probe.reverse),
    scale: probe.scale ?? null,
    precision: probe.precision ?? null,
    length: block.output.size + block.input.size,
  });
  const made = probeBlock(judged, tolerances.rtol);
  const details = ownDetails(block, dotProductDetails(label, judged));
  return { snapshot: cutBlock(made.numbers, made.judged, tiles), ...hashedDetails(details) };
}

function cutTaylor(probe: Probe<"taylor">, label: string, parent: Parent): Cut {
  const { block, tolerances, tiles } = parent;
  const posted = {
    steps: probe.steps,
    remainders: probe.remainders.map(fromWire),
    scale: probe.scale ?? null,
    value: probe.value ?? soleValue(parent),
    precision: probe.precision ?? null,
  };
  const judged = judgeTaylor(posted, tolerances.rtol);
  const made = probeBlock(judged, tolerances.rtol);
  const details = ownDetails(block, taylorDetails(label, probe, judged));
  return { snapshot: cutBlock(made.numbers, made.judged, tiles), ...hashedDetails(details) };
}

/** A block with one output is itself the function that is probed. */
function soleValue({ outputValues }: Parent): number | null {
  return outputValues?.length === 1 && Number.isFinite(outputValues[0]) ? Math.abs(outputValues[0]) : null;
}

function cutDirectional(probe: Probe<"directional">, label: string, parent: Parent): Cut {
  const { block, outputValues, tolerances, tiles } = parent;
  const posted = {
    method: probe.method,
    step: probe.step ?? null,
    derivative: probe.derivative.map(fromWire),
    reference: probe.reference.map(fromWire),
  };
  const { numbers, judged } = judgeDirectional(posted, outputValues, tolerances);
  const told = detailsOf(block, numbers, judged);
  const details: BlockDetails = {
    ...told,
    output: numbers.rows === block.output.size ? told.output : NAMELESS,
    input: NAMELESS,
    probe: directionalDetails(label, judged),
  };
  return { snapshot: cutBlock(numbers, judged, tiles), ...hashedDetails(details) };
}

/** Rows and columns of the Jacobian are none of a probe's. */
const NAMELESS = { unit: null, elements: null } as const;

function ownDetails(block: SkeletonBlock, probe: BlockDetails["probe"]): BlockDetails {
  return {
    output: NAMELESS,
    input: NAMELESS,
    derivativeMethod: block.derivative.method,
    references: [],
    signatures: [],
    probe,
    sources: block.sources,
  };
}
