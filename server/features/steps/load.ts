import type { StepStudy } from "../../../shared/numerics/steps/types.ts";
import type { Reader } from "../../db/reader.ts";
import type { StoredTile } from "../../ingest/assemble.ts";
import type { BlockDetails } from "../../ingest/blockDetails.ts";
import type { JudgePool } from "../../ingest/judgePool.ts";
import type { StepsTask } from "../../ingest/judgeSteps.ts";
import type { PlaneName, PlaneTiles } from "../../ingest/planes.ts";
import { loadSnapshots, loadTiles } from "../../record/readPlanes.ts";
import type { SnapshotPlanes } from "../../record/readPlanes.ts";
import type { LoadedBlock } from "../blocks/loadBlockRows.ts";

/** Studies the steps of one reference from its planes in the record; the work is a worker's. */
export async function loadStepStudy(
  reader: Reader,
  judge: JudgePool,
  block: LoadedBlock,
  reference: number,
  window: readonly [number, number],
): Promise<StepStudy> {
  const snapshot = (await loadSnapshots(reader, [block.snapshotId])).get(block.snapshotId) as SnapshotPlanes;
  const mine = snapshot.planes.filter((plane) => isWanted(plane, reference));
  const tiles = await loadTiles(
    reader,
    mine.flatMap((plane) => plane.tiles),
  );
  const plane = (name: PlaneName, step = 0): StoredTile[] | null => {
    const found = mine.find((one) => one.name === name && one.step === step);
    return found === undefined ? null : found.tiles.map((id) => tiles.get(id) as StoredTile);
  };
  const { method, stepKind, precision, columns, steps } = (JSON.parse(block.details) as BlockDetails).references[
    reference
  ];
  const posted = mine.filter(({ name }) => name === "posted").sort((a, b) => a.step - b.step);
  const task: StepsTask = {
    rows: block.rowCount,
    columns: block.columnCount,
    outputValues: plane("outputValues"),
    inputValues: plane("inputValues"),
    method,
    stepKind,
    precision,
    covered: columns,
    stated: plane("stated"),
    steps: posted.map(({ step }) => ({
      step: steps[step] ?? null,
      columnSteps: plane("columnSteps", step),
      values: plane("posted", step) ?? [],
    })),
    judged: { rtol: block.rtol, floor: block.floor },
    window,
  };
  return judge.steps(task);
}

function isWanted({ name, reference }: PlaneTiles<number>, wanted: number): boolean {
  if (name === "outputValues" || name === "inputValues") return true;
  return reference === wanted && (name === "posted" || name === "columnSteps" || name === "stated");
}
