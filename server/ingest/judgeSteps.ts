import type { JudgedWith, StepStudy } from "../../shared/numerics/steps/types.ts";
import { studySteps } from "../../shared/numerics/steps/studySteps.ts";
import type { ReferenceNumbers, ReferenceStep } from "../../shared/numerics/types.ts";
import { assemble } from "./assemble.ts";
import type { StoredTile } from "./assemble.ts";
import type { PlaneName } from "./planes.ts";

/** One posted step of a reference, as it stands in the record. */
export interface StoredStep {
  /** One for all columns; null where none was posted, or where each column has its own. */
  readonly step: number | null;
  readonly columnSteps: readonly StoredTile[] | null;
  readonly values: readonly StoredTile[];
}

export interface StepsTask {
  readonly rows: number;
  readonly columns: number;
  readonly outputValues: readonly StoredTile[] | null;
  readonly inputValues: readonly StoredTile[] | null;
  readonly method: ReferenceNumbers["method"];
  readonly stepKind: ReferenceNumbers["stepKind"];
  readonly precision: number | null;
  /** Covered columns, or null for all. */
  readonly covered: readonly number[] | null;
  readonly stated: readonly StoredTile[] | null;
  readonly steps: readonly StoredStep[];
  readonly judged: JudgedWith;
  /** Columns first <= c < last that are wanted. */
  readonly window: readonly [number, number];
}

/** The study of one reference from stored tiles: all of its columns are read, as its rows are judged by all. Pure; runs in a worker. */
export function judgeSteps(task: StepsTask): StepStudy {
  const { rows, columns, covered } = task;
  const width = covered === null ? columns : covered.length;
  const floats = (name: PlaneName, tiles: readonly StoredTile[], length: number) =>
    new Float64Array(assemble(name, tiles, length));
  const reference: ReferenceNumbers = {
    method: task.method,
    stepKind: task.stepKind,
    precision: task.precision,
    columns: covered && Int32Array.from(covered),
    steps: task.steps.map(({ step, columnSteps, values }): ReferenceStep => ({
      step: columnSteps === null ? step : floats("columnSteps", columnSteps, width),
      values: floats("posted", values, rows * width),
    })),
    uncertainty: task.stated && floats("stated", task.stated, rows * width),
    notFinite: 0,
  };
  const block = {
    rows,
    columns,
    outputValues: task.outputValues && floats("outputValues", task.outputValues, rows),
    inputValues: task.inputValues && floats("inputValues", task.inputValues, columns),
    references: [reference],
  };
  return studySteps(block, 0, task.judged, task.window);
}
