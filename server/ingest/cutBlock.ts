import { createHash } from "node:crypto";
import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import { toWire, toWireOrNull } from "../../shared/schemas/common.ts";
import type { BlockNumbers, JudgedBlock, ReferenceNumbers } from "../../shared/numerics/types.ts";
import type { PostedSnapshot, StoredWorst } from "./judgePosting.ts";
import { PLANE_KIND } from "./planes.ts";
import type { PlaneTiles } from "./planes.ts";
import { resolutionBins } from "./resolutionBins.ts";
import type { TileSet } from "./tileSet.ts";

/** Cuts the numbers of a judged block into tiles. */
export function cutBlock(numbers: BlockNumbers, judged: JudgedBlock, tiles: TileSet): PostedSnapshot {
  const planes = cutPlanes(numbers, judged, tiles);
  return {
    hash: snapshotHash(numbers, judged, planes, tiles),
    rows: numbers.rows,
    columns: numbers.columns,
    planes,
    rtol: judged.tolerances.rtol,
    floor: judged.floor,
    counts: judged.counts,
    worst: storedWorst(judged, numbers.columns),
    resolutions: resolutionBins(judged.resolution),
  };
}

function cutPlanes(numbers: BlockNumbers, judged: JudgedBlock, tiles: TileSet): PlaneTiles<number>[] {
  const planes = [
    tiles.addPlane("derivative", numbers.derivative),
    tiles.addPlane("reference", judged.best.value),
    tiles.addPlane("resolution", judged.resolution),
    tiles.addPlane("verdict", judged.verdict),
    tiles.addPlane("source", judged.best.source),
    tiles.addPlane("step", judged.best.step),
  ];
  if (numbers.outputValues) planes.push(tiles.addPlane("outputValues", numbers.outputValues));
  if (numbers.inputValues) planes.push(tiles.addPlane("inputValues", numbers.inputValues));
  numbers.references.forEach((reference, r) => {
    reference.steps.forEach((step, s) => planes.push(tiles.addPlane("posted", step.values, r, s)));
    reference.steps.forEach(({ step }, s) => {
      if (step instanceof Float64Array) planes.push(tiles.addPlane("columnSteps", step, r, s));
    });
    if (reference.uncertainty !== null) planes.push(tiles.addPlane("stated", statedPlane(reference), r));
  });
  return planes;
}

function statedPlane({ uncertainty, steps }: ReferenceNumbers): Float64Array {
  if (uncertainty instanceof Float64Array) return uncertainty;
  return new Float64Array(steps[0].values.length).fill(uncertainty ?? NaN);
}

/** Follows from the numbers and tolerances alone, not from what the record holds already. */
function snapshotHash(
  numbers: BlockNumbers,
  judged: JudgedBlock,
  planes: readonly PlaneTiles<number>[],
  tiles: TileSet,
): Uint8Array {
  const { rtol, floorRel, floorAbs } = judged.tolerances;
  const hash = createHash("sha256");
  hash.update(JSON.stringify([numbers.rows, numbers.columns, rtol, floorRel, floorAbs]));
  for (const plane of planes) {
    hash.update(Uint32Array.of(PLANE_KIND[plane.name], plane.reference, plane.step, plane.tiles.length));
    for (const tile of plane.tiles) hash.update(tiles.hashAt(tile));
  }
  return hash.digest();
}

function storedWorst(judged: JudgedBlock, columns: number): StoredWorst | null {
  const { worst } = judged;
  if (worst === null) return null;
  return {
    row: worst.row,
    column: worst.column,
    verdict: VERDICTS[judged.verdict[worst.row * columns + worst.column]],
    error: toWireOrNull(worst.error),
    derivative: toWire(worst.derivative),
    reference: toWireOrNull(worst.reference),
    uncertainty: toWireOrNull(worst.uncertainty),
  };
}
