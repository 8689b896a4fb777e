import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import { toWireOrNull } from "../../shared/schemas/common.ts";
import type { ProbeDetails } from "../../shared/schemas/block.ts";
import type { PostedProbe } from "../../shared/schemas/build.ts";
import { shown } from "../../shared/numerics/probes/shown.ts";
import type { JudgedBlock } from "../../shared/numerics/types.ts";
import type { JudgedProbe, JudgedTaylorProbe } from "../../shared/numerics/probes/types.ts";

/** What pages show of a dot product. */
export function dotProductDetails(label: string, judged: JudgedProbe): ProbeDetails {
  return { kind: "dot-product", label, ...common(judged), slope: null, usableSteps: null, steps: [], remainders: [] };
}

export function taylorDetails(
  label: string,
  { steps, remainders }: Extract<PostedProbe, { kind: "taylor" }>,
  judged: JudgedTaylorProbe,
): ProbeDetails {
  const { slope, usableSteps } = judged;
  return { kind: "taylor", label, ...common(judged), slope, usableSteps, steps, remainders };
}

function common(judged: JudgedProbe) {
  const { verdict, error, uncertainty, floor, tolerance, assumed, sentence } = judged;
  return {
    verdict,
    error: toWireOrNull(error),
    uncertainty: toWireOrNull(uncertainty),
    resolution: toWireOrNull(uncertainty === 0 ? 0 : uncertainty / floor),
    tolerance,
    assumed,
    sentence,
  };
}

/** Of a directional derivative: its worst row. */
export function directionalDetails(label: string, judged: JudgedBlock): ProbeDetails {
  const { counts, tolerances, worst } = judged;
  const row = worst?.row ?? 0;
  const { entries, invalid, disagrees, agrees } = counts;
  const outcome =
    invalid > 0
      ? `${of(invalid, entries)} not a finite number`
      : disagrees > 0
        ? `${of(disagrees, entries)} off by up to ${shown(Number(worst?.error))}`
        : agrees === entries
          ? `right in ${entries === 1 ? "its element" : `all ${entries} elements`}`
          : `${of(entries - agrees, entries)} not to be told at this tolerance`;
  return {
    kind: "directional",
    label,
    verdict: VERDICTS[judged.verdict[row]],
    error: toWireOrNull(worst?.error ?? NaN),
    uncertainty: toWireOrNull(worst?.uncertainty ?? NaN),
    resolution: toWireOrNull(judged.resolution[row]),
    tolerance: tolerances.rtol,
    assumed: judged.best.assumed.includes(true),
    sentence: `the directional derivative is ${outcome}, ${shown(tolerances.rtol)} is allowed`,
    slope: null,
    usableSteps: null,
    steps: [],
    remainders: [],
  };
}

function of(count: number, entries: number): string {
  return `in ${count} of ${entries} elements`;
}
