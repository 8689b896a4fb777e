import type { Tolerances } from "../../../shared/domain/tolerances.ts";
import type { JudgedBlock, ReferenceNumbers } from "../../../shared/numerics/types.ts";
import { judgeBlock } from "../../../shared/numerics/verdict/judgeBlock.ts";
import { PROBLEMS } from "../problems/all.ts";
import type { Problem } from "../problems/problem.ts";
import { problemBlock } from "./blocks.ts";
import { complexStep, differences, realResiduals } from "./references.ts";

type Make = (problem: Problem, x: readonly number[]) => ReferenceNumbers;

const FORWARD_SWEEP = [1e-4, 1e-5, 1e-6, 1e-7, 1e-8];
const CENTRAL_SWEEP = [1e-2, 1e-3, 1e-4, 1e-5, 1e-6];

/** The kinds of reference that the published problems are judged with; single steps near the usual best ones. */
export const KINDS = {
  "central sweep": (problem, x) => differences(realResiduals(problem), x, "central-difference", CENTRAL_SWEEP),
  "single central": (problem, x) => differences(realResiduals(problem), x, "central-difference", [3e-6]),
  "forward sweep": (problem, x) => differences(realResiduals(problem), x, "forward-difference", FORWARD_SWEEP),
  "single forward": (problem, x) => differences(realResiduals(problem), x, "forward-difference", [1e-8]),
  "backward sweep": (problem, x) => differences(realResiduals(problem), x, "backward-difference", FORWARD_SWEEP),
  "complex step": (problem, x) => complexStep(problem, x),
} as const satisfies Record<string, Make>;
export type Kind = keyof typeof KINDS;

/** One problem at one point, judged with its right Jacobian. */
export interface Trial {
  readonly name: string;
  readonly problem: Problem;
  readonly x: readonly number[];
  readonly truth: Float64Array;
  readonly reference: ReferenceNumbers;
  readonly judged: JudgedBlock;
}

/** All problems at all their points with one kind of reference. */
export function trialsOf(kind: Kind, tolerances: Tolerances): Trial[] {
  return PROBLEMS.flatMap((problem) =>
    problem.points.map((x, point) => {
      const reference = KINDS[kind](problem, x);
      const block = problemBlock(problem, x, [reference]);
      const judged = judgeBlock(block, tolerances);
      return { name: `${problem.name} at point ${point}`, problem, x, truth: block.derivative, reference, judged };
    }),
  );
}
