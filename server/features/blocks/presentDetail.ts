import { MOTIONS, VERDICTS } from "../../../shared/domain/vocabulary.ts";
import type { BlockDetail } from "../../../shared/schemas/block.ts";
import { toWire, toWireOrNull } from "../../../shared/schemas/common.ts";
import type { BlockCosts, BlockDetails } from "../../ingest/blockDetails.ts";
import type { BlockPlanes, Window } from "./loadBlockPlanes.ts";
import type { LoadedBlock } from "./loadBlockRows.ts";
import type { Kin } from "./loadProbes.ts";
import { presentBlockRow } from "./present.ts";

/** Byte of no code: no reference, nothing to compare with. */
const NONE = 255;

export function presentBlockDetail(
  block: LoadedBlock,
  planes: BlockPlanes,
  sides: { readonly outputValues: Float64Array | null; readonly inputValues: Float64Array | null },
  window: Window,
  format: "json" | "f64le",
  posted: Float64Array | null,
  kin: Kin,
): BlockDetail {
  const details = JSON.parse(block.details) as BlockDetails;
  const costs = block.costs === null ? null : (JSON.parse(block.costs) as BlockCosts);
  const numbers = (values: Float64Array) => (format === "f64le" ? base64(values) : Array.from(values, toWireOrNull));
  const indices = (codes: Uint8Array) =>
    format === "f64le" ? base64(codes) : Array.from(codes, (code) => (code === NONE ? null : code));
  const words = (codes: Uint8Array, list: readonly string[]) =>
    format === "f64le" ? base64(codes) : Array.from(codes, (code) => list[code] ?? null);
  return {
    ...presentBlockRow(block),
    buildId: String(block.buildId),
    commit: block.sha,
    lane: block.lane,
    window: { rows: [...window.rows], columns: [...window.columns] },
    format,
    derivative: format === "f64le" ? base64(planes.derivative) : Array.from(planes.derivative, toWire),
    reference: numbers(planes.reference),
    uncertainty: numbers(planes.uncertainty),
    error: numbers(planes.error),
    verdict: words(planes.verdict, VERDICTS),
    motionPlane: planes.motion && words(planes.motion, MOTIONS),
    age: planes.age && indices(planes.age),
    source: indices(planes.source),
    uncertaintyKind: commonKind(details, planes.source),
    ...(posted === null ? {} : { posted: numbers(posted) }),
    outputValues: sides.outputValues && Array.from(sides.outputValues, toWire),
    inputValues: sides.inputValues && Array.from(sides.inputValues, toWire),
    derivativeMethod: details.derivativeMethod,
    references: details.references.map((reference, index) => ({
      index,
      method: reference.method,
      uncertaintyKind: reference.uncertaintyKind,
      assumed: reference.assumed,
      stepKind: reference.stepKind,
      steps: [...reference.steps],
      precision: reference.precision,
      columns: reference.columns && [...reference.columns],
      cost: costs?.references[index] ?? null,
    })),
    probes: [...kin.probes],
    probeOf: kin.probeOf,
    sources: [...details.sources],
  };
}

function base64(values: Float64Array | Uint8Array): string {
  return Buffer.from(values.buffer, values.byteOffset, values.byteLength).toString("base64");
}

/** How the uncertainties of the window's entries were come by, where all in one way. */
function commonKind(details: BlockDetails, source: Uint8Array): BlockDetail["uncertaintyKind"] {
  const used = new Set(source);
  used.delete(NONE);
  const kinds = new Set([...used].map((index) => details.references[index]?.uncertaintyKind));
  return kinds.size === 1 ? ([...kinds][0] ?? null) : null;
}
